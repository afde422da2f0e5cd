import { Readable } from 'node:stream';
import ExcelJS from 'exceljs';
import { workbookOf } from '../factories/workbooks.ts';
import { median, timesMs, type Figure } from './measure.ts';
import type { World } from './world.ts';

const rowCount = 10_000;

/** A 10 000-row sheet of results; each run differs in one cell, so that no run is "already imported". */
const longSheet = (run: number) => {
  const rows = Array.from({ length: rowCount }, (_, index) => [
    'EFF-1',
    new Date(Date.UTC(2025, 9, 1) + (index % 160) * 86_400_000),
    index % 2 ? 'TSS' : 'Chloride',
    10 + ((index + run) % 50),
    'mg/L',
    2,
  ]);
  return workbookOf({ Results: [['Client ID', 'Sampled', 'Parameter', 'Result', 'Units', 'RL'], ...rows] });
};

async function readAlone(bytes: Buffer): Promise<number> {
  const reader = new ExcelJS.stream.xlsx.WorkbookReader(Readable.from([bytes]), {
    sharedStrings: 'cache',
    styles: 'cache',
    worksheets: 'emit',
    hyperlinks: 'ignore',
    entries: 'emit',
  });
  let cells = 0;
  for await (const sheet of reader) for await (const row of sheet) cells += row.cellCount;
  return cells;
}

/** The cells of a finished workbook written again by exceljs alone. */
async function writeAlone(bytes: Buffer): Promise<() => Promise<unknown>> {
  const source = new ExcelJS.Workbook();
  await source.xlsx.load(bytes as never);
  return () => {
    const copy = new ExcelJS.Workbook();
    for (const sheet of source.worksheets) {
      const target = copy.addWorksheet(sheet.name);
      sheet.eachRow((row, number) =>
        row.eachCell((cell, column) => {
          target.getCell(number, column).value = cell.value;
        }),
      );
    }
    return copy.xlsx.writeBuffer();
  };
}

/** Upload and staging of a long workbook beside exceljs reading it; the quarterly workbook beside exceljs writing its cells. */
export async function benchSpreadsheets(world: World): Promise<Figure[]> {
  const cookie = await world.cookieOf('engineer');
  const { id: laboratoryId } = (await world.owner.query<{ id: string }>('select id from laboratories'))
    .rows[0]!;
  const sheets = await Promise.all(Array.from({ length: 6 }, (_, run) => longSheet(run)));
  const upload = async (run: number) => {
    const form = new FormData();
    form.set('id', crypto.randomUUID());
    form.set('laboratoryId', laboratoryId);
    form.set('file', new File([new Uint8Array(sheets[run + 1]!)], `long-${run}.xlsx`));
    const answer = await fetch(`${world.base}/api/v1/sites/${world.siteId}/lab-imports`, {
      method: 'POST',
      headers: { cookie, 'idempotency-key': crypto.randomUUID() },
      body: form,
    });
    if (!answer.ok) throw new Error(await answer.text());
    await answer.json();
  };
  const imported = median(await timesMs(5, upload));
  const read = median(await timesMs(5, () => readAlone(sheets[0]!)));
  const preview = async () =>
    Buffer.from(
      await (
        await fetch(`${world.base}/api/v1/sites/${world.siteId}/reports/2025-Q4/preview`, {
          headers: { cookie },
        })
      ).arrayBuffer(),
    );
  const exported = median(await timesMs(5, preview));
  const written = median(await timesMs(5, await writeAlone(await preview())));
  return [
    {
      what: 'upload of a 10 000-row workbook: guarded, read in a child, judged, staged',
      value: imported,
      unit: 'ms',
      bare: 'exceljs reading it alone',
      bareValue: read,
    },
    {
      what: 'quarterly workbook: computed and written',
      value: exported,
      unit: 'ms',
      bare: 'exceljs writing the same cells',
      bareValue: written,
    },
  ];
}
