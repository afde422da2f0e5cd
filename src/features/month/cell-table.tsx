import { Link } from 'react-router';
import { totalPairs } from '#shared/reconciliation/total-pairs.ts';
import type { MonthView } from '#shared/views/month-view.ts';
import { ScrollBox } from '../../components/page.tsx';
import { Empty } from '../../components/state.tsx';
import {
  formatHa,
  formatPercent,
  formatSigned,
  formatVolume,
  volumeUnit,
} from '../../lib/format-quantity.ts';

export function CellTable({ view, slug, units }: { view: MonthView; slug: string; units: 'metric' | 'us' }) {
  const rows = view.cells.filter((cell) => cell.predictedM3 !== null);
  if (!rows.length)
    return (
      <Empty>
        No balance for this month yet: the climate record does not reach it, or a gap is not decided.
      </Empty>
    );
  const total = totalPairs(rows);
  return (
    <>
      <ScrollBox label="Leachate of the month by cell">
        <table className="tbl">
          <caption className="sr-only">
            Leachate of {view.title} by cell, {volumeUnit(units)}
          </caption>
          <thead>
            <tr>
              <th scope="col">Cell</th>
              <th scope="col" className="r">
                Predicted, {volumeUnit(units)}
              </th>
              <th scope="col" className="r">
                Pumped, {volumeUnit(units)}
              </th>
              <th scope="col" className="r">
                Gap, {volumeUnit(units)}
              </th>
              <th scope="col" className="r">
                Gap, %
              </th>
            </tr>
          </thead>
          <tbody>
            {rows.map((row) => (
              <tr key={row.code}>
                <th scope="row">
                  <Link to={`/sites/${slug}/compare/${view.month}?cell=${row.code}`}>
                    {row.code} {row.name}
                  </Link>
                  <span className="hint block">
                    {row.areaM2 === null ? '' : `${formatHa(row.areaM2)} ha, `}
                    {row.cover}
                  </span>
                </th>
                <td className="r">{formatVolume(row.predictedM3!, units)}</td>
                <td className="r">
                  {row.measuredM3 === null ? 'not read' : formatVolume(row.measuredM3, units)}
                  {row.isAllocated && <span className="hint block">allocated</span>}
                  {row.estimatedPercent > 0 && (
                    <span className="hint block">{row.estimatedPercent.toFixed(1)} % estimated</span>
                  )}
                </td>
                <td className="r">
                  {row.differenceM3 === null
                    ? '–'
                    : formatSigned(units === 'us' ? row.differenceM3 * 264.172052 : row.differenceM3)}
                </td>
                <td className="r">
                  {row.percent === null ? <span className="text-muted">–</span> : formatPercent(row.percent)}
                </td>
              </tr>
            ))}
          </tbody>
          <tfoot>
            <tr>
              <th scope="row">Site</th>
              <td className="r">{formatVolume(total.predictedM3!, units)}</td>
              <td className="r">
                {total.measuredM3 === null ? 'not read' : formatVolume(total.measuredM3, units)}
              </td>
              <td className="r">
                {total.differenceM3 === null
                  ? '–'
                  : formatSigned(units === 'us' ? total.differenceM3 * 264.172052 : total.differenceM3)}
              </td>
              <td className="r">
                {total.differenceM3 !== null && total.predictedM3
                  ? formatPercent((100 * total.differenceM3) / total.predictedM3)
                  : '–'}
              </td>
            </tr>
          </tfoot>
        </table>
      </ScrollBox>
      <p className="hint mt-2">
        Rows may not add to the total because of rounding. Percent is not shown while the prediction is under
        the floor.
      </p>
    </>
  );
}
