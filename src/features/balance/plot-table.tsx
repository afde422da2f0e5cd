import { monthName } from '#shared/calendar/month.ts';
import { dayNameShort } from '#shared/calendar/day.ts';
import type { BalanceView } from '#shared/views/balance-view.ts';
import { termRegister, type TermName } from '#shared/water-balance/terms.ts';
import { ScrollBox } from '../../components/page.tsx';
import { formatHa, formatM3 } from '../../lib/format-quantity.ts';

/** Across the row these add up, percolation apart: what comes in, less what goes away or is stored, is the leachate. */
const plotTerms: TermName[] = [
  'precipitationMm',
  'soilWaterBroughtMm',
  'surfaceReturnMm',
  'returnToWasteMm',
  'freeMoistureMm',
  'runoffToStormMm',
  'coverDrainMm',
  'aetMm',
  'dSnowMm',
  'dSoilMm',
  'percolationMm',
  'absorbedMm',
  'dWasteMm',
  'leakedMm',
  'leachateMm',
];
/** Shown only in a month in which some plot has them. */
const rareTerms = new Set<TermName>([
  'soilWaterBroughtMm',
  'surfaceReturnMm',
  'returnToWasteMm',
  'freeMoistureMm',
  'coverDrainMm',
  'dSnowMm',
  'leakedMm',
]);

export function PlotTable({
  view,
  cell: only,
  onOpen,
}: {
  view: BalanceView;
  /** One cell, or null for the whole site. */
  cell: BalanceView['cells'][number] | null;
  onOpen: (stepId: string, term: TermName) => void;
}) {
  const cells = only ? [only] : view.cells;
  const total = only ?? view.site;
  const shown = plotTerms.filter(
    (term) =>
      !rareTerms.has(term) ||
      cells.some((cell) => cell.plots.some((plot) => Math.abs(plot.terms[term]) > 1e-9)),
  );
  return (
    <ScrollBox label="Balance by plot">
      <table className="tbl tbl-tight">
        <caption className="sr-only">
          Balance of {monthName(view.month)} by plot, m³. Any number opens its working.
        </caption>
        <thead>
          <tr>
            <th scope="col" className="sticky left-0 bg-surface">
              Plot
            </th>
            <th scope="col" className="r">
              Area, ha
            </th>
            <th scope="col" className="r">
              Days
            </th>
            {shown.map((term) => (
              <th key={term} scope="col" className="r">
                {termRegister[term].name}, m³
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {cells.flatMap((cell) =>
            cell.plots.map((plot) => (
              <tr key={plot.stepId}>
                <th scope="row" className="sticky left-0 bg-surface">
                  {cell.code} {plot.plotName}
                  <span className="hint block">
                    {plot.coverName}
                    {plot.fromOn.endsWith('-01') ? '' : `, from ${dayNameShort(plot.fromOn)}`}
                  </span>
                </th>
                <td className="r">{formatHa(plot.areaM2)}</td>
                <td className="r">{plot.dayCount}</td>
                {shown.map((term) => (
                  <td key={term} className={term === 'percolationMm' ? 'r italic text-muted' : 'r'}>
                    <button
                      type="button"
                      className="number-button"
                      aria-label={`${formatM3((plot.terms[term] * plot.areaM2) / 1000)} m³, working of ${termRegister[term].name}, ${cell.code} ${plot.plotName}`}
                      onClick={() => onOpen(plot.stepId, term)}
                    >
                      {formatM3((plot.terms[term] * plot.areaM2) / 1000)}
                    </button>
                  </td>
                ))}
              </tr>
            )),
          )}
        </tbody>
        <tfoot>
          <tr>
            <th scope="row" className="sticky left-0 bg-surface">
              {only ? only.code : 'Site'}
            </th>
            <td className="r">{formatHa(total.areaM2)}</td>
            <td />
            {shown.map((term) => (
              <td key={term} className="r">
                {formatM3(total.volumesM3[term])}
              </td>
            ))}
          </tr>
        </tfoot>
      </table>
    </ScrollBox>
  );
}
