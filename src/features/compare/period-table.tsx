import { monthName } from '#shared/calendar/month.ts';
import type { PeriodSide, PeriodTotal } from '#shared/reconciliation/period-totals.ts';
import type { CompareView } from '#shared/views/balance-view.ts';
import { ScrollBox } from '../../components/page.tsx';
import { formatM3, formatNumber, formatPercent, formatSigned } from '../../lib/format-quantity.ts';

const names: Record<PeriodTotal['name'], string> = {
  month: 'Month',
  'rolling-twelve': 'Twelve months',
  'calendar-year': 'Calendar year so far',
  'since-opening': 'Since opening',
};

const units: [string, (side: PeriodSide) => string][] = [
  ['m³', (side) => formatM3(side.volumeM3)],
  ['mm', (side) => formatNumber(side.depthMm, 1)],
  ['% of rain', (side) => (side.percentOfRain === null ? 'no rain' : formatNumber(side.percentOfRain, 1))],
  ['L/ha·d', (side) => formatNumber(side.lPerHaDay, 0)],
  ['gal/ac·d', (side) => formatNumber(side.galPerAcreDay, 0)],
];

/** Month, twelve months, year and since opening, both sides in every unit. */
export function PeriodTable({ view }: { view: CompareView }) {
  return (
    <ScrollBox label="Both sides over month, twelve months, year and since opening">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Predicted and pumped over four periods in five units</caption>
        <thead>
          <tr>
            <th scope="col" rowSpan={2}>
              Period
            </th>
            <th scope="colgroup" colSpan={units.length} className="text-center border-l border-line">
              Predicted
            </th>
            <th scope="colgroup" colSpan={units.length} className="text-center border-l border-line">
              Pumped
            </th>
            <th scope="colgroup" colSpan={3} className="text-center border-l border-line">
              Gap
            </th>
          </tr>
          <tr>
            {['predicted', 'pumped'].flatMap((side) =>
              units.map(([unit]) => (
                <th key={side + unit} scope="col" className="r">
                  {unit}
                </th>
              )),
            )}
            {['m³', 'mm', '%'].map((unit) => (
              <th key={unit} scope="col" className="r">
                {unit}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {view.periods.map((period) => (
            <tr key={period.name}>
              <th scope="row" className="whitespace-nowrap">
                {names[period.name]}
                <span className="hint block">
                  {period.first === period.last
                    ? monthName(period.last)
                    : `from ${monthName(period.first)}, ${period.countedCount} of ${period.monthCount} months`}
                </span>
              </th>
              {[period.predicted, period.measured].flatMap((side, index) =>
                units.map(([unit, format]) => (
                  <td key={`${index} ${unit}`} className="r">
                    {side ? format(side) : 'not read'}
                  </td>
                )),
              )}
              <td className="r font-semibold">
                {period.differenceM3 === null ? '–' : formatSigned(period.differenceM3)}
              </td>
              <td className="r">
                {period.differenceMm === null ? '–' : formatSigned(period.differenceMm, 1)}
              </td>
              <td className={period.isPercentMuted ? 'r text-muted' : 'r'}>
                {period.percent === null ? 'not defined' : formatPercent(period.percent)}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}
