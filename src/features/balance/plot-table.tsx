import { monthName } from '#shared/calendar/month.ts';
import { dayNameShort } from '#shared/calendar/day.ts';
import type { BalanceView } from '#shared/views/balance-view.ts';
import { termRegister, type TermName } from '#shared/water-balance/terms.ts';
import { ScrollBox } from '../../components/page.tsx';
import { formatHa, formatM3 } from '../../lib/format-quantity.ts';

const plotTerms: TermName[] = [
  'precipitationMm',
  'runoffToStormMm',
  'runoffToLeachateMm',
  'aetMm',
  'dSoilMm',
  'percolationMm',
  'absorbedMm',
  'dWasteMm',
  'leachateMm',
];

export function PlotTable({
  view,
  onOpen,
}: {
  view: BalanceView;
  onOpen: (stepId: string, term: TermName) => void;
}) {
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
            {plotTerms.map((term) => (
              <th key={term} scope="col" className="r">
                {termRegister[term].name}, m³
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {view.cells.flatMap((cell) =>
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
                {plotTerms.map((term) => (
                  <td key={term} className="r">
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
              Site
            </th>
            <td className="r">{formatHa(view.site.areaM2)}</td>
            <td />
            {plotTerms.map((term) => (
              <td key={term} className="r">
                {formatM3(view.site.volumesM3[term])}
              </td>
            ))}
          </tr>
        </tfoot>
      </table>
    </ScrollBox>
  );
}
