import { useState } from 'react';
import { useParams } from 'react-router';
import { dayName } from '#shared/calendar/day.ts';
import { monthName, quarterName } from '#shared/calendar/month.ts';
import type { LimitsView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { PageHead, ScrollBox, Section } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { Template, VerdictWord } from '../../components/words.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { Exceedance } from './exceedance.tsx';
import { limitWords, statisticNames } from './limit-words.ts';
import { Permits } from './permit-forms.tsx';
import { ShareTrack } from './share-track.tsx';

type Judged = LimitsView['verdicts'][number];

function stateSentence(view: LimitsView): string {
  const open = view.exceedances.filter((one) => !one.closedAt);
  const running = open.filter((one) => one.clocks.some((clock) => !clock.doneAt)).length;
  const count = (word: string) => view.verdicts.filter((one) => one.verdict.word === word).length;
  const parts = [
    open.length
      ? `${open.length} ${open.length === 1 ? 'exceedance is' : 'exceedances are'} open${running ? `, ${running} with a clock running` : ''}`
      : '',
    count('exceed') ? `${count('exceed')} exceed` : '',
    count('cannot be judged') ? `${count('cannot be judged')} cannot be judged` : '',
    count('incomplete') ? `${count('incomplete')} incomplete` : '',
  ].filter(Boolean);
  if (!view.verdicts.length) return 'No limit is in force in this quarter.';
  return `${parts.length ? `${parts.join(', ')}. ` : ''}${count('pass')} of ${view.verdicts.length} verdicts pass so far.`;
}

function VerdictTable({ rows, onOpen }: { rows: readonly Judged[]; onOpen: (row: Judged) => void }) {
  return (
    <ScrollBox label={`Verdicts at ${rows[0]!.pointCode}`}>
      <table className="tbl">
        <caption className="sr-only">Verdicts at {rows[0]!.pointCode}</caption>
        <thead>
          <tr>
            <th scope="col">Parameter</th>
            <th scope="col" className="r">
              Limit
            </th>
            <th aria-hidden className="hidden sm:table-cell">
              <span className="flex justify-between w-[230px] pl-2">
                <span>nothing</span>
                <span className="text-s-limit">the limit</span>
              </span>
            </th>
            <th scope="col">Verdict</th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.limit.id + row.month}>
              <th scope="row">
                {row.analyteName}
                {row.limit.fraction && ` ${row.limit.fraction}`}
                {row.limit.quantity === 'load' && ', load'}
                <span className="hint block">
                  {statisticNames[row.limit.statistic as 'range']}, {monthName(row.month)}
                  {!row.limit.confirmedAt && (
                    <>
                      {' '}
                      <Template />
                    </>
                  )}
                </span>
              </th>
              <td className="r">
                {row.limit.statistic === 'range'
                  ? `${row.limit.lowText} to ${row.limit.highText}`
                  : row.limit.valueText}
                <span className="hint block">{row.limit.unit}</span>
              </td>
              <td className="!py-0 !align-middle hidden sm:table-cell">
                <ShareTrack verdict={row.verdict} />
              </td>
              <td className="min-w-[8rem] sm:min-w-[220px]">
                <VerdictWord word={row.verdict.word} />
                <span className="hint block">
                  {row.verdict.sentence}{' '}
                  <button
                    type="button"
                    className="link"
                    aria-label={`Working: ${row.analyteName}, ${statisticNames[row.limit.statistic as 'range']}, ${monthName(row.month)}`}
                    onClick={() => onOpen(row)}
                  >
                    Working
                  </button>
                </span>
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

function Working({ row }: { row: Judged }) {
  const { verdict, limit } = row;
  return (
    <div className="grid gap-4">
      <p>
        <VerdictWord word={verdict.word} /> {verdict.sentence}
      </p>
      {verdict.note && <p className="box box-note">{verdict.note}</p>}
      <p>
        Limit: {limitWords(limit)}, {statisticNames[limit.statistic as 'range']};{' '}
        {limit.isInclusive ? 'a value equal to it complies' : 'a value equal to it exceeds'};{' '}
        {limit.samplesMin} samples required a month; {limit.citation}.
      </p>
      {verdict.days.length === 0 ? (
        <Empty>No sample in the month.</Empty>
      ) : (
        <table className="tbl tbl-tight">
          <caption>Days of the month</caption>
          <thead>
            <tr>
              <th scope="col">Day</th>
              {limit.quantity === 'load' && (
                <th scope="col" className="r">
                  Flow, m³
                </th>
              )}
              <th scope="col" className="r">
                Value, {limit.unit}
              </th>
              <th scope="col" className="r">
                Share of limit
              </th>
              <th scope="col">Note</th>
            </tr>
          </thead>
          <tbody>
            {verdict.days.map((day) => (
              <tr key={day.siteDay}>
                <th scope="row">{dayName(day.siteDay)}</th>
                {limit.quantity === 'load' && (
                  <td className="r">
                    {day.flowM3 === null ? 'not read' : formatNumber(Number(day.flowM3), 1)}
                  </td>
                )}
                <td className="r">{day.valueText || '–'}</td>
                <td className="r">{day.share === null ? '–' : formatNumber(day.share, 2)}</td>
                <td>
                  {day.exceeds ? 'above the limit' : (day.unjudged ?? (day.isBelow ? 'below detection' : ''))}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </div>
  );
}

/** Verdicts of the quarter so far by point, exceedances with their clocks, and the permit behind them. */
export function LimitsPage() {
  const { month = '' } = useParams();
  const { site } = usePlace();
  const query = useRecord<LimitsView>(site.id, `/limits/${month}`);
  const [opened, setOpened] = useState<Judged | null>(null);
  const view = query.data;
  return (
    <>
      <PageHead
        title={view ? `Limits, ${quarterName(view.quarter)}` : 'Limits'}
        sentence={view && stateSentence(view)}
        crumb={
          view &&
          view.permits
            .map((permit) => `Permit ${permit.number}, in force since ${dayName(permit.fromOn)}`)
            .join('; ')
        }
      />
      <Viewed query={query}>
        {(data) => {
          const points = [...new Set(data.verdicts.map((one) => one.pointCode))];
          const open = data.exceedances.filter((one) => !one.closedAt || data.months.includes(one.month));
          const undecided = data.verdicts.filter(
            (one) =>
              one.verdict.word === 'cannot be judged' ||
              one.verdict.word === 'incomplete' ||
              one.verdict.note,
          );
          return (
            <>
              <div className="grid gap-4">
                {open.map((one) => (
                  <Exceedance key={one.id} exceedance={one} now={data.now} />
                ))}
              </div>
              {points.map((point) => (
                <Section
                  key={point}
                  title={point}
                  aside="every result as a share of its own limit; hollow: below detection"
                >
                  <VerdictTable
                    rows={data.verdicts.filter((one) => one.pointCode === point)}
                    onOpen={setOpened}
                  />
                </Section>
              ))}
              {undecided.length > 0 && (
                <Section title="Not decided, or hanging on a rule">
                  <ul className="sheet lines px-4 list-none">
                    {undecided.map((row) => (
                      <li key={row.limit.id + row.month}>
                        <strong>
                          {row.analyteName}, {statisticNames[row.limit.statistic as 'range']},{' '}
                          {monthName(row.month)}: {row.verdict.word}.
                        </strong>{' '}
                        {row.verdict.sentence} {row.verdict.note}
                      </li>
                    ))}
                  </ul>
                </Section>
              )}
              <p className="hint mt-4">
                A computed pass is not a compliance determination. The permit and the laboratory’s report
                govern.
              </p>
              <Permits view={data} />
              <Panel
                title={opened ? `${opened.analyteName}, ${monthName(opened.month)}` : ''}
                isOpen={opened !== null}
                onClose={() => setOpened(null)}
              >
                {opened && <Working row={opened} />}
              </Panel>
            </>
          );
        }}
      </Viewed>
    </>
  );
}
