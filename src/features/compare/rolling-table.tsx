import { monthName } from '#shared/calendar/month.ts';
import { compareLinesChart } from '#shared/charts/compare-chart.ts';
import type { CompareView } from '#shared/views/balance-view.ts';
import { ScrollBox, Section } from '../../components/page.tsx';
import { LineChart } from '../../components/line-chart.tsx';
import { formatM3, formatNumber, formatPercent, formatSigned } from '../../lib/format-quantity.ts';

function Statistics({ view }: { view: CompareView }) {
  const { statistics: s } = view;
  const rows: [string, string, string][] = [
    [
      'Pairs',
      String(s.pairCount),
      s.leftOutCount
        ? `${s.leftOutCount} ${s.leftOutCount === 1 ? 'month' : 'months'} left out: nothing was read`
        : 'every month has both',
    ],
    [
      'PBIAS',
      s.pbiasPercent === null ? 'not defined' : formatPercent(s.pbiasPercent),
      s.pbiasPercent === null
        ? ''
        : s.pbiasPercent > 0
          ? 'model too high: it predicts more than was pumped'
          : s.pbiasPercent < 0
            ? 'model too low: it predicts less than was pumped'
            : 'no bias',
    ],
    [
      'RMSE',
      s.rmse === null ? 'not defined' : `${formatM3(s.rmse)} m³`,
      'typical size of a monthly difference',
    ],
    [
      'Nash–Sutcliffe',
      s.nashSutcliffe === null ? 'not defined' : formatNumber(s.nashSutcliffe, 2),
      '1 agrees fully; 0 is no better than the mean',
    ],
  ];
  return (
    <table className="tbl tbl-tight sheet max-w-[66ch]">
      <caption className="sr-only">Fit of the months shown</caption>
      <tbody>
        {rows.map(([name, value, words]) => (
          <tr key={name}>
            <th scope="row">{name}</th>
            <td className="r">{value}</td>
            <td className="text-muted">{words}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** Rolling twelve and cumulative, as a picture and as the table of the same numbers. */
export function RollingTable({ view }: { view: CompareView }) {
  const last = view.rows.at(-1);
  const gap = last && last.cumulativeMeasuredM3 - last.cumulativePredictedM3;
  return (
    <>
      <Section title="Cumulative" aside="m³">
        <LineChart
          config={compareLinesChart(view.rows)}
          summary={`Cumulative volumes from ${monthName(view.rows[0]!.month)}. At the end ${formatM3(last?.cumulativeMeasuredM3 ?? 0)} m³ pumped against ${formatM3(last?.cumulativePredictedM3 ?? 0)} predicted, ${formatSigned(gap ?? 0)} m³. The table below has the same numbers.`}
        />
      </Section>
      <Section
        title="Rolling twelve and cumulative, table"
        aside="m³; months without a reading count on neither side"
      >
        <ScrollBox label="Rolling twelve and cumulative">
          <table className="tbl tbl-tight">
            <caption className="sr-only">Rolling twelve months and cumulative volumes, m³</caption>
            <thead>
              <tr>
                <th scope="col" className="sticky left-0 bg-surface">
                  Month
                </th>
                <th scope="col" className="r">
                  12 months predicted
                </th>
                <th scope="col" className="r">
                  12 months pumped
                </th>
                <th scope="col" className="r">
                  Gap, %
                </th>
                <th scope="col" className="r">
                  Months counted
                </th>
                <th scope="col" className="r">
                  Cumulative predicted
                </th>
                <th scope="col" className="r">
                  Cumulative pumped
                </th>
                <th scope="col" className="r">
                  Cumulative gap
                </th>
              </tr>
            </thead>
            <tbody>
              {view.rows.map((row) => (
                <tr key={row.month}>
                  <th scope="row" className="sticky left-0 bg-surface whitespace-nowrap">
                    {monthName(row.month)}
                  </th>
                  <td className="r">{row.rolling.monthCount ? formatM3(row.rolling.predictedM3) : '–'}</td>
                  <td className="r">
                    {row.rolling.monthCount ? formatM3(row.rolling.measuredM3) : 'not read'}
                  </td>
                  <td className="r">
                    {row.rolling.percent === null ? '–' : formatPercent(row.rolling.percent)}
                  </td>
                  <td className="r">{row.rolling.monthCount}</td>
                  <td className="r">{formatM3(row.cumulativePredictedM3)}</td>
                  <td className="r">{formatM3(row.cumulativeMeasuredM3)}</td>
                  <td className="r">{formatSigned(row.cumulativeMeasuredM3 - row.cumulativePredictedM3)}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </ScrollBox>
      </Section>
      <Section title="Fit">
        <Statistics view={view} />
      </Section>
    </>
  );
}
