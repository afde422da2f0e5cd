import type { Sheet, SheetCell } from '#shared/sheets/sheet.ts';

const cellOf = (value: string | number | null): SheetCell | null =>
  value === null || value === ''
    ? null
    : typeof value === 'number'
      ? { kind: 'number', text: String(value), value }
      : { kind: 'text', text: value };

/** A sheet from rows of plain values, numbered from 1 or as given. */
export const sheetOf = (
  rows: (string | number | null)[][],
  options: { name?: string; firstRow?: number; merges?: Sheet['merges'] } = {},
): Sheet => ({
  name: options.name ?? 'Results',
  isHidden: false,
  merges: options.merges ?? [],
  rows: rows.map((cells, index) => ({
    number: (options.firstRow ?? 1) + index,
    isHidden: false,
    cells: cells.map(cellOf),
  })),
});
