import { Fragment } from 'react';
import { dayName } from '#shared/calendar/day.ts';
import { addMonths, monthName, monthRange, monthShortName } from '#shared/calendar/month.ts';
import { counted } from '#shared/count-words.ts';
import { seriesLooks } from '#shared/charts/series.ts';
import type { ForecastSummary, Spread } from '#shared/forecast/summarise-members.ts';
import type { ForecastView } from '#shared/views/forecast-view.ts';
import { ScrollBox, Section } from '../../components/page.tsx';
import { formatM3, formatNumber, formatSigned } from '../../lib/format-quantity.ts';
import { largest, SpreadTrack } from './plan-tracks.tsx';

const letters = 'ABC';
const inHundred = (share: number) => Math.round(share * 100);
const span = ({ low, high }: Spread, format: (value: number) => string) =>
  `${format(low)} to ${format(high)}`;

const lastMonthOf = ({ about }: ForecastView) => addMonths(about.firstMonth, about.monthCount - 1);

/** The middle, with low and high under it. */
function SpreadNumber({ spread }: { spread: Spread }) {
  return (
    <span className="leading-tight inline-block py-1">
      <span className="font-semibold block">{formatM3(spread.middle)}</span>
      <span className="hint whitespace-nowrap">{span(spread, formatM3)}</span>
    </span>
  );
}

function PlanHead({ view, leachateMax }: { view: ForecastView; leachateMax: number }) {
  const { scenarios, store } = view.about;
  return (
    <thead>
      <tr>
        <th scope="col" rowSpan={2}>
          Month
        </th>
        {scenarios.map((plan, index) => (
          <th
            key={plan.name}
            scope="colgroup"
            colSpan={store ? 4 : 2}
            className="border-l border-line !text-ink !font-semibold"
          >
            {letters[index]}. {plan.name}
          </th>
        ))}
      </tr>
      <tr>
        {scenarios.map((plan) => (
          <Fragment key={plan.name}>
            <th scope="col" className="r border-l border-line">
              leachate, m³
            </th>
            <th aria-hidden>0 to {formatM3(leachateMax)}</th>
            {store && (
              <>
                <th scope="col">level, 0 to {formatNumber(store.crestLevelM, 2)} m</th>
                <th scope="col" className="r">
                  loads
                </th>
              </>
            )}
          </Fragment>
        ))}
      </tr>
    </thead>
  );
}

function PlanCells({
  view,
  summary,
  row,
  leachateMax,
}: {
  view: ForecastView;
  summary: ForecastSummary;
  row: number;
  leachateMax: number;
}) {
  const { store } = view.about;
  const month = summary.months[row]!;
  return (
    <>
      <td className="r border-l border-line">
        <SpreadNumber spread={month.leachateM3} />
      </td>
      <td className="relative !p-0">
        <SpreadTrack
          spreads={summary.months.map((one) => one.leachateM3)}
          index={row}
          width={180}
          min={0}
          max={leachateMax}
          colour={seriesLooks.predicted.colour}
        />
      </td>
      {store && (
        <>
          <td className="relative !p-0">
            <span className="sr-only">
              {formatNumber(month.levelM.middle, 2)} m,{' '}
              {span(month.levelM, (value) => formatNumber(value, 2))}
            </span>
            <SpreadTrack
              spreads={summary.months.map((one) => one.levelM)}
              index={row}
              width={120}
              min={0}
              max={store.crestLevelM}
              colour={seriesLooks.storage.colour}
              limit={store.operatingLevelM}
            />
          </td>
          <td className="r">
            <SpreadNumber spread={month.loads} />
          </td>
        </>
      )}
    </>
  );
}

/** Months down the page, the plans beside each other: leachate, level, loads. */
function PlanTable({ view }: { view: ForecastView }) {
  const { about, summaries } = view;
  const months = monthRange(about.firstMonth, lastMonthOf(view));
  const leachateMax = largest(summaries, (month) => month.leachateM3.high);
  return (
    <ScrollBox label="Leachate, level and loads by month and plan">
      <table className="tbl tbl-tight [&_tbody_td]:!py-0 [&_tbody_td]:!align-middle [&_tbody_th]:!align-middle">
        <caption className="sr-only">
          Leachate, m³, level, m, and loads by month: middle, low and high of {about.memberCount} draws
        </caption>
        <PlanHead view={view} leachateMax={leachateMax} />
        <tbody>
          {months.map((month, row) => (
            <tr key={month} className="h-11">
              <th scope="row" className="whitespace-nowrap !min-w-0 !py-0">
                {monthShortName(month)}{' '}
                {(row === 0 || month.endsWith('-01')) && (
                  <span className="text-muted font-normal">{month.slice(0, 4)}</span>
                )}
              </th>
              {summaries.map((summary, index) => (
                <PlanCells key={index} view={view} summary={summary} row={row} leachateMax={leachateMax} />
              ))}
            </tr>
          ))}
        </tbody>
        <tfoot>
          <tr>
            <th scope="row" className="whitespace-nowrap">
              {about.monthCount} months
            </th>
            {summaries.map((summary, index) => (
              <Fragment key={index}>
                <td className="r border-l border-line">
                  <SpreadNumber spread={summary.total.leachateM3} />
                </td>
                <td />
                {about.store && (
                  <>
                    <td />
                    <td className="r">
                      <SpreadNumber spread={summary.total.loads} />
                    </td>
                  </>
                )}
              </Fragment>
            ))}
          </tr>
        </tfoot>
      </table>
    </ScrollBox>
  );
}

/** Months in which the level is passed in more than a tenth of the draws, the worst named. */
function overWords(view: ForecastView, summary: ForecastSummary): string {
  const risky = summary.months
    .map((month, index) => ({ share: month.overShare, month: addMonths(view.about.firstMonth, index) }))
    .filter((one) => one.share > 0.1);
  const worst = [...risky].sort((a, b) => b.share - a.share)[0];
  if (!worst) return '';
  return ` ${counted(risky.length, 'month', 'months')} with more than one draw in ten over it, most in ${monthName(worst.month)} (${inHundred(worst.share)} of 100).`;
}

function Says({ view }: { view: ForecastView }) {
  const { about, summaries } = view;
  const { store, storm } = about;
  const [first, ...others] = summaries;
  return (
    <ul className="sheet lines px-4 list-none">
      {others.map((summary, index) => {
        const saved = first!.total.leachateM3.middle - summary.total.leachateM3.middle;
        return (
          <li key={index}>
            <strong>
              {about.scenarios[index + 1]!.name} {saved >= 0 ? 'saves' : 'adds'} {formatM3(Math.abs(saved))}{' '}
              m³ in the middle case
            </strong>{' '}
            against {about.scenarios[0]!.name.toLowerCase()}
            {store &&
              `; the loads change by ${formatSigned(summary.total.loads.middle - first!.total.loads.middle)}`}
            .
          </li>
        );
      })}
      {store &&
        summaries.map((summary, index) => (
          <li key={about.scenarios[index]!.name}>
            <strong>
              {letters[index]} needs haulage in {inHundred(summary.haulShare)} of 100 draws.
            </strong>{' '}
            {summary.overShare > 0
              ? `In ${inHundred(summary.overShare)} of 100 the operating level is passed all the same, at ${formatNumber(store.loadsPerDayMax, 0)} loads a day.${overWords(view, summary)}`
              : 'The operating level is never passed.'}
            {summary.spillShare > 0 && (
              <strong>
                {' '}
                In {inHundred(summary.spillShare)} of 100 draws it runs over its crest of{' '}
                {formatNumber(store.crestLevelM, 2)} m, by up to {formatM3(summary.total.spillM3.high)} m³ in
                nine of ten.
              </strong>
            )}
          </li>
        ))}
      {storm && store && (
        <li>
          <strong>
            {storm.marginM3 >= 0
              ? `A storm of ${formatNumber(storm.stormMm, 0)} mm fits now, with ${formatM3(storm.marginM3)} m³ to spare.`
              : `A storm of ${formatNumber(storm.stormMm, 0)} mm is short of room by ${formatM3(-storm.marginM3)} m³: ${counted(storm.loads, 'load', 'loads')} to haul first.`}
          </strong>{' '}
          It brings {formatM3(storm.stormM3)} m³ from {formatNumber(storm.openAreaM2 / 10_000, 1)} ha of open
          ground ({formatNumber(storm.share * 100, 0)} %) and the store itself, into{' '}
          {formatM3(storm.headroomM3)} m³ between {formatNumber(store.startLevelM, 2)} and{' '}
          {formatNumber(store.operatingLevelM, 2)} m.
        </li>
      )}
      {about.cautions.map((sentence) => (
        <li key={sentence} className="text-muted">
          {sentence}
        </li>
      ))}
    </ul>
  );
}

function Assumptions({ view }: { view: ForecastView }) {
  const { about, summaries } = view;
  const grounds = [
    ...new Set(
      about.scenarios.flatMap((plan) => plan.endAreas.map((one) => `${one.cellCode} ${one.coverName}`)),
    ),
  ].sort();
  const areaOf = (index: number, key: string) =>
    about.scenarios[index]!.endAreas.find((one) => `${one.cellCode} ${one.coverName}` === key)?.areaHa ?? 0;
  return (
    <>
      <ScrollBox label="What each plan is put together from">
        <table className="tbl tbl-tight">
          <caption className="sr-only">What each plan is put together from</caption>
          <thead>
            <tr>
              <th scope="col">At the end</th>
              {about.scenarios.map((plan, index) => (
                <th key={plan.name} scope="col" className="r">
                  {letters[index]}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {grounds.map((key) => (
              <tr key={key}>
                <th scope="row">{key}, ha</th>
                {about.scenarios.map((plan, index) => (
                  <td key={plan.name} className="r">
                    {formatNumber(areaOf(index, key), 1)}
                  </td>
                ))}
              </tr>
            ))}
            <tr>
              <th scope="row">Leachate, low to high, m³</th>
              {summaries.map((summary, index) => (
                <td key={index} className="r">
                  {span(summary.total.leachateM3, formatM3)}
                </td>
              ))}
            </tr>
            {about.store && (
              <tr>
                <th scope="row">Loads, low to high</th>
                {summaries.map((summary, index) => (
                  <td key={index} className="r">
                    {span(summary.total.loads, formatM3)}
                  </td>
                ))}
              </tr>
            )}
          </tbody>
        </table>
      </ScrollBox>
      <ul className="list-disc pl-5 mt-3 text-sm">
        {about.scenarios.flatMap((plan, index) =>
          plan.changes.map((change) => (
            <li key={`${index} ${change.onDay} ${change.sentence}`}>
              {letters[index]}, {dayName(change.onDay)}: {change.sentence}
            </li>
          )),
        )}
        <li>
          Parameter set {about.parameterSet.name}, version {about.parameterSet.version}; climate years from{' '}
          {monthName(about.sourceFirst)} to {monthName(about.sourceLast)}, {about.yearCount} to draw from.
        </li>
        {about.store && (
          <li>
            {about.store.code} {about.store.name}: {formatNumber(about.store.startLevelM, 2)} m on{' '}
            {dayName(about.store.startedOn)}; plant {formatNumber(about.store.plantM3PerDay, 0)} m³/d; loads
            of {formatNumber(about.store.loadM3, 2)} m³.
          </li>
        )}
      </ul>
    </>
  );
}

/** The numbers of a forecast that is done. */
export function ForecastResult({ view }: { view: ForecastView }) {
  return (
    <>
      <PlanTable view={view} />
      <p className="hint mt-2">
        Shaded: 8 draws in 10 fall inside. Dashed with open marks: the middle, predicted. Low, middle and high
        are the 10, 50 and 90 percent values; a year of lows is rarer than one low month, so the figures of
        the whole span are not sums of the column.
      </p>
      <div className="grid gap-8 mt-8 lg:grid-cols-2 items-start [&>section]:mt-0">
        <Section title="What it says">
          <Says view={view} />
        </Section>
        <Section title="Put together from">
          <Assumptions view={view} />
        </Section>
      </div>
    </>
  );
}
