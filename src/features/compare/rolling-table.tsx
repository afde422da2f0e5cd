import { monthName } from '#shared/calendar/month.ts';
import { compareLinesChart } from '#shared/charts/compare-chart.ts';
import type { CompareView } from '#shared/views/balance-view.ts';
import { LineChart } from '../../components/line-chart.tsx';
import { ScrollBox, Section } from '../../components/page.tsx';
import { formatM3, formatNumber, formatPercent, formatSigned } from '../../lib/format-quantity.ts';
import { BreakCauses, MassPicture } from './mass-picture.tsx';

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
    <table className="tbl tbl-tight sheet">
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

function Delay({ view }: { view: CompareView }) {
  if (!view.lags.length)
    return <p className="text-muted">A delay needs at least three months with both sides.</p>;
  return (
    <table className="tbl tbl-tight sheet">
      <caption className="sr-only">Correlation of predicted with what was pumped some months later</caption>
      <thead>
        <tr>
          <th scope="col">Months later</th>
          <th scope="col" className="r">
            r
          </th>
          <th scope="col" className="r">
            r²
          </th>
          <th scope="col" className="r">
            Pairs
          </th>
        </tr>
      </thead>
      <tbody>
        {view.lags.map((lag) => (
          <tr key={lag.lagMonths}>
            <th scope="row">{lag.lagMonths}</th>
            <td className="r">{formatSigned(lag.r, 3)}</td>
            <td className="r">{formatNumber(lag.r * lag.r, 3)}</td>
            <td className="r">{lag.pairCount}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** Double mass, delay and fit, and the rolling twelve as a table. */
export function RollingTable({ view }: { view: CompareView }) {
  const { massBreak } = view;
  const last = view.rows.at(-1)!;
  return (
    <>
      <div className="grid gap-8 lg:grid-cols-[minmax(0,7fr)_minmax(0,5fr)] [&>section]:mt-0">
        <Section
          title={
            massBreak
              ? `Each cubic metre predicted brought ${massBreak.slopeBefore.toFixed(2)} pumped before ${monthName(massBreak.month)}, ${massBreak.slopeAfter.toFixed(2)} after`
              : 'Pumped against predicted, added up'
          }
        >
          <div className="sheet pad">
            <MassPicture view={view} />
          </div>
        </Section>
        <div className="[&>section:first-child]:mt-0">
          <Section title="What could explain the bend" aside="dated evidence first">
            <BreakCauses view={view} />
          </Section>
          <Section title="Delay" aside="predicted against pumped, months later">
            <Delay view={view} />
          </Section>
          <Section title="Fit">
            <Statistics view={view} />
          </Section>
        </div>
      </div>
      <Section title="Cumulative by month" aside="m³">
        <LineChart
          config={compareLinesChart(view.rows)}
          summary={`Cumulative volumes from ${monthName(view.firstMonth ?? view.rows[0]!.month)}. At the end ${formatM3(last.cumulativeMeasuredM3)} m³ pumped against ${formatM3(last.cumulativePredictedM3)} predicted, ${formatSigned(last.cumulativeMeasuredM3 - last.cumulativePredictedM3)} m³. The table below has the same numbers.`}
        />
      </Section>
      <Section
        title="Rolling twelve and cumulative, table"
        aside={`m³; cumulative from ${view.firstMonth ? monthName(view.firstMonth) : 'the first month'}; months without a reading count on neither side`}
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
    </>
  );
}
