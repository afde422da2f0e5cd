import { monthShortName } from '#shared/calendar/month.ts';
import { totalPairs } from '#shared/reconciliation/total-pairs.ts';
import type { CompareView, ComparedRow } from '#shared/views/balance-view.ts';
import { ScrollBox } from '../../components/page.tsx';
import { Word } from '../../components/words.tsx';
import { formatM3, formatMm, formatPercent, formatSigned } from '../../lib/format-quantity.ts';
import { hatchFill, HatchDefs } from './hatches.tsx';
import { noteLooks } from './month-note.tsx';
import { BarTrack, CoverTrack, GapTrack, StorageTrack, VolumeTrack } from './tracks.tsx';

const niceMax = (value: number): number => {
  const power = 10 ** Math.floor(Math.log10(Math.max(value, 1)));
  return Math.ceil(value / power) * power;
};

function WhatHappened({ row }: { row: ComparedRow }) {
  return (
    <div className="text-sm leading-tight min-w-[190px] py-1">
      {row.events.map((event) => (
        <p key={event.onDay + event.sentence}>
          <strong>{event.when}</strong> {event.sentence}
        </p>
      ))}
      {row.estimatedPercent > 0 && <p>◌ {row.estimatedPercent.toFixed(1)} % estimated</p>}
      {row.note && (
        <p>
          <Word look={noteLooks[row.note.state] ?? 'open'}>{row.note.state}</Word> {row.note.cause}
        </p>
      )}
    </div>
  );
}

function Totals({ rows }: { rows: readonly ComparedRow[] }) {
  const total = (pick: (row: ComparedRow) => number) => rows.reduce((sum, row) => sum + pick(row), 0);
  const volumes = totalPairs(rows);
  return (
    <tr>
      <th scope="row" className="sticky left-0 bg-surface">
        {rows.length} months
      </th>
      <td />
      <td className="r">{formatMm(total((row) => row.rainMm))}</td>
      <td />
      <td className="r">{formatMm(total((row) => row.aetMm))}</td>
      <td />
      <td />
      <td className="r">{formatM3(total((row) => row.predictedM3))}</td>
      <td className="r">{volumes.measuredM3 === null ? 'not read' : formatM3(volumes.measuredM3)}</td>
      <td />
      <td className="r">{volumes.differenceM3 === null ? '–' : formatSigned(volumes.differenceM3)}</td>
      <td />
      <td />
    </tr>
  );
}

/** Time runs down: each month a band, numbers and tracks on the same line, events where they happened. */
export function MonthTable({ view, onOpen }: { view: CompareView; onOpen: (month: string) => void }) {
  const { rows } = view;
  const rainMax = niceMax(Math.max(...rows.map((row) => row.rainMm)));
  const aetMax = niceMax(Math.max(...rows.map((row) => row.aetMm)));
  const storage = rows.map((row) => row.storageMm);
  const volumeMax = niceMax(Math.max(...rows.flatMap((row) => [row.predictedM3, row.measuredM3 ?? 0])));
  const gapMax = niceMax(Math.max(...rows.map((row) => Math.abs(row.differenceM3 ?? 0)), 1));
  const kinds = [
    ...new Map(rows.flatMap((row) => row.covers.map((cover) => [cover.kind, cover] as const))).values(),
  ];
  const cell = 'relative !py-0 !align-middle';
  return (
    <>
      <HatchDefs />
      <ScrollBox label={`Predicted and pumped by month, ${view.cell.code}`}>
        <table className="tbl [&_td]:!px-1.5 [&_th]:!px-1.5">
          <caption className="sr-only">
            Predicted and pumped leachate of {view.cell.code} {view.cell.name} by month, m³
          </caption>
          <thead>
            <tr>
              <th scope="col" className="sticky left-0 bg-surface">
                Month
              </th>
              <th scope="col">Cover, share</th>
              <th scope="col" className="r">
                Rain, mm
              </th>
              <th aria-hidden>0 to {rainMax}</th>
              <th scope="col" className="r">
                ET, mm
              </th>
              <th aria-hidden>0 to {aetMax}</th>
              <th scope="col">
                Storage, mm
                <br />
                {formatM3(Math.min(...storage))} to {formatM3(Math.max(...storage))}
              </th>
              <th scope="col" className="r">
                Predicted, m³
              </th>
              <th scope="col" className="r">
                Pumped, m³
              </th>
              <th aria-hidden>0 to {formatM3(volumeMax)}</th>
              <th scope="col" className="r">
                Gap, m³
              </th>
              <th aria-hidden>±{formatM3(gapMax)}</th>
              <th scope="col">What happened</th>
            </tr>
          </thead>
          <tbody>
            {rows.map((row, index) => (
              <tr key={row.month} className="h-11">
                <th scope="row" className={`${cell} !sticky left-0 z-10 bg-surface`}>
                  <button
                    type="button"
                    className="number-button whitespace-nowrap"
                    onClick={() => onOpen(row.month)}
                  >
                    {monthShortName(row.month)}{' '}
                    <span className="font-normal text-muted">{row.month.slice(0, 4)}</span>
                  </button>
                </th>
                <td className={cell}>
                  <span className="sr-only">
                    {row.covers.map((cover) => `${cover.name} ${Math.round(cover.share * 100)} %`).join(', ')}
                  </span>
                  <CoverTrack covers={row.covers} />
                </td>
                <td className={`${cell} r`}>{formatMm(row.rainMm)}</td>
                <td className={cell}>
                  <BarTrack value={row.rainMm} max={rainMax} colour="var(--color-s-rain)" />
                </td>
                <td className={`${cell} r`}>{formatMm(row.aetMm)}</td>
                <td className={cell}>
                  <BarTrack value={row.aetMm} max={aetMax} colour="var(--color-s-et)" isDashed />
                </td>
                <td className={cell}>
                  <span className="sr-only">{formatMm(row.storageMm)}</span>
                  <StorageTrack
                    rows={rows}
                    index={index}
                    min={Math.min(...storage)}
                    max={Math.max(...storage)}
                  />
                </td>
                <td className={`${cell} r`}>{formatM3(row.predictedM3)}</td>
                <td className={`${cell} r`}>
                  {row.measuredM3 === null ? (
                    <span className="text-muted">not read</span>
                  ) : (
                    <>
                      {row.allocatedPercent > 0 && (
                        <span aria-hidden title="allocated">
                          ⊕{' '}
                        </span>
                      )}
                      {formatM3(row.measuredM3)}
                      {row.allocatedPercent > 0 && <span className="sr-only"> allocated</span>}
                    </>
                  )}
                </td>
                <td className={cell}>
                  <VolumeTrack rows={rows} index={index} max={volumeMax} />
                </td>
                <td className={`${cell} r`}>
                  {row.differenceM3 === null ? (
                    '–'
                  ) : (
                    <span className={row.isInside ? '' : 'font-semibold'}>
                      {formatSigned(row.differenceM3)}
                      <span className={`block text-sm font-normal ${row.isPercentMuted ? 'text-muted' : ''}`}>
                        {row.percent === null ? '' : formatPercent(row.percent)}
                      </span>
                    </span>
                  )}
                </td>
                <td className={cell}>
                  <GapTrack row={row} max={gapMax} />
                </td>
                <td className={cell}>
                  <WhatHappened row={row} />
                </td>
              </tr>
            ))}
          </tbody>
          <tfoot>
            <Totals rows={rows} />
          </tfoot>
        </table>
      </ScrollBox>
      <div className="flex flex-wrap gap-x-5 gap-y-1 mt-2 hint">
        {kinds.map((cover) => (
          <span key={cover.kind} className="inline-flex items-center gap-2">
            <svg aria-hidden width="26" height="16">
              <rect
                x=".5"
                y=".5"
                width="25"
                height="15"
                fill={hatchFill(cover.kind)}
                stroke="var(--color-edge)"
              />
            </svg>
            {cover.name}
          </span>
        ))}
      </div>
      <p className="hint mt-2">
        Dashed with hollow squares: predicted. Solid with filled circles: pumped. Grey ground in the last
        track: inside the month’s tolerance. A percent in grey: under {view.percentFloorMm} mm predicted. Any
        month opens its numbers and notes.
      </p>
    </>
  );
}
