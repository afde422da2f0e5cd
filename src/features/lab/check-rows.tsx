import { useState } from 'react';
import { dayName } from '#shared/calendar/day.ts';
import type { LabRowState } from '#shared/lab/lab-row.ts';
import { ScrollBox } from '../../components/page.tsx';
import { Word } from '../../components/words.tsx';
import { formatResult } from '../../lib/format-quantity.ts';
import { kindOf, kinds, type Row } from './row-kinds.ts';

const shownMax = 200;

const stateFilters: { value: LabRowState | 'all'; label: string }[] = [
  { value: 'all', label: 'all' },
  { value: 'ok', label: 'new' },
  { value: 'warned', label: 'noticed and changed' },
  { value: 'held', label: 'held' },
  { value: 'skipped', label: 'left out' },
];

export function Rows({ rows }: { rows: readonly Row[] }) {
  const [filter, setFilter] = useState<LabRowState | 'all'>('all');
  const shown = rows.filter((row) => filter === 'all' || row.state === filter);
  return (
    <>
      <div className="flex flex-wrap gap-2 mb-3 no-print" role="group" aria-label="Show only">
        {stateFilters.map((one) => (
          <button
            key={one.value}
            type="button"
            className="choice !w-auto"
            aria-pressed={filter === one.value}
            onClick={() => setFilter(one.value)}
          >
            {one.label}
          </button>
        ))}
      </div>
      <ScrollBox label="Rows of the file">
        <table className="tbl tbl-tight">
          <caption className="sr-only">Rows of the file and what will be written</caption>
          <thead>
            <tr>
              <th scope="col">Row</th>
              <th scope="col">Point, parameter</th>
              <th scope="col">Sampled</th>
              <th scope="col" className="r">
                Will be
              </th>
              <th scope="col">Verdict</th>
            </tr>
          </thead>
          <tbody>
            {shown.slice(0, shownMax).map((row) => {
              const kind = kindOf(row);
              return (
                <tr key={row.sheet + row.cell}>
                  <th scope="row">
                    {row.rowNumber}
                    <span className="hint block">{row.cell}</span>
                  </th>
                  <td>
                    {row.pointCode ?? row.pointText}
                    <span className="block">
                      {row.analyteName ?? row.analyteText} {row.fraction}
                    </span>
                  </td>
                  <td className="whitespace-nowrap">
                    {row.sampledOn ? dayName(row.sampledOn) : row.sampledText}
                  </td>
                  <td className="r">
                    {kind === 'left out' ? (
                      <span className="text-muted">{row.resultText}</span>
                    ) : row.value === null ? (
                      <span className="text-muted">{row.missingReason ?? row.resultText}</span>
                    ) : (
                      `${formatResult(row)} ${row.unit}`
                    )}
                    {row.supersedesWords && <span className="hint block">was {row.supersedesWords}</span>}
                  </td>
                  <td className="min-w-[260px]">
                    <Word look={kinds[kind].look}>
                      {kind === 'noticed' ? 'New, noticed' : kind[0]!.toUpperCase() + kind.slice(1)}
                    </Word>
                    {row.messages.length > 0 && <span className="hint block">{row.messages.join(' ')}</span>}
                  </td>
                </tr>
              );
            })}
          </tbody>
        </table>
      </ScrollBox>
      {shown.length > shownMax && (
        <p className="hint mt-2">
          The first {shownMax} of {shown.length} rows are shown; all were read and counted.
        </p>
      )}
    </>
  );
}
