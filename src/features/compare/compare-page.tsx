import { useState } from 'react';
import { Link, useParams, useSearchParams } from 'react-router';
import { monthName } from '#shared/calendar/month.ts';
import type { CompareView, NetPair } from '#shared/views/balance-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, Section } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { Word } from '../../components/words.tsx';
import { formatInstant, formatM3, formatPercent, formatSigned } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { MonthNote } from './month-note.tsx';
import { MonthTable } from './month-table.tsx';
import { PeriodTable } from './period-table.tsx';
import { RollingTable } from './rolling-table.tsx';

const severityWords = { stops: 'Stops', ask: 'Ask', note: 'Agrees' } as const;
/** Findings that say something about the months without agreeing or asking. */
const noteWords: Record<string, string> = { lag: 'Delay', 'divided-by-prediction': 'Shared' };
const severityLooks = { stops: 'bad', ask: 'ask', note: 'good' } as const;

function Findings({ view }: { view: CompareView }) {
  return (
    <ul className="sheet lines px-4 list-none">
      {view.findings.map((finding) => (
        <li key={finding.code} className="flex flex-wrap gap-x-5 gap-y-1 items-baseline">
          <Word look={noteWords[finding.code] ? 'open' : severityLooks[finding.severity]}>
            {noteWords[finding.code] ?? severityWords[finding.severity]}
          </Word>
          <span className="flex-1 min-w-[240px]">{finding.sentence}</span>
          {finding.difference !== undefined && (
            <span className="font-semibold whitespace-nowrap">
              {formatSigned(finding.difference)} m³{' '}
              <span className="text-muted font-normal">of ±{formatM3(finding.tolerance ?? 0)}</span>
            </span>
          )}
        </li>
      ))}
    </ul>
  );
}

/** The other pair where liquid was returned; the two are never mixed. */
function NetLine({ net }: { net: NetPair }) {
  const difference = net.netM3 - net.predictedM3;
  return (
    <p className="box mb-4 max-w-[80ch]">
      <strong>Net of what was returned:</strong> {formatM3(net.pumpedM3)} m³ pumped less{' '}
      {formatM3(net.returnedM3)} returned is {formatM3(net.netM3)} m³, against {formatM3(net.predictedM3)}{' '}
      predicted by the run without the return: {formatSigned(difference)} m³
      {net.predictedM3 > 0 && ` (${formatPercent((100 * difference) / net.predictedM3)})`}. It assumes that
      returned liquid drains within the month. Gross over the run without the return:{' '}
      {net.predictedM3 > 0
        ? formatPercent((100 * (net.pumpedM3 - net.predictedM3)) / net.predictedM3)
        : 'not defined'}
      . {net.monthCount} months counted.
    </p>
  );
}

function stateSentence(view: CompareView): string {
  const asking = view.findings.filter((finding) => finding.severity === 'ask');
  const outside = view.rows.filter((row) => row.isInside === false).length;
  const unexplained = view.rows.filter(
    (row) => row.isInside === false && (!row.note || row.note.state === 'open'),
  ).length;
  if (!view.rows.length) return 'There is no month to compare yet.';
  const span = `${monthName(view.rows[0]!.month)} to ${monthName(view.rows.at(-1)!.month)}:`;
  if (view.rows.every((row) => row.measuredM3 === null)) return `${span} nothing was read.`;
  if (!outside) return `${span} every month that was read lies inside its tolerance.`;
  return `${span} ${outside} of ${view.rows.length} months lie outside their tolerance${unexplained ? `, ${unexplained} without an explanation` : ', all explained'}.${asking.length ? '' : ' The year as a whole agrees.'}`;
}

/** Predicted against pumped for one cell; time runs down the page. */
export function ComparePage() {
  const { month = '' } = useParams();
  const [search, setSearch] = useSearchParams();
  const { site } = usePlace();
  const cellCode = search.get('cell');
  const isRolling = search.get('view') === 'rolling';
  const monthCount = Number(search.get('months')) === 36 ? 36 : 12;
  const query = useRecord<CompareView>(
    site.id,
    `/compare/${month}?months=${isRolling ? 36 : monthCount}${cellCode ? `&cell=${encodeURIComponent(cellCode)}` : ''}`,
  );
  const [open, setOpen] = useState<string | null>(null);
  const choose = (name: string, value: string | null) =>
    setSearch((before) => {
      const next = new URLSearchParams(before);
      if (value) next.set(name, value);
      else next.delete(name);
      return next;
    });
  const view = query.data;
  return (
    <div className="print-wide">
      <PageHead
        title={view ? `Compare, ${view.cell.code} ${view.cell.name}` : 'Compare'}
        sentence={view && stateSentence(view)}
        crumb={
          view && (
            <>
              {view.run.kind === 'frozen' ? `Frozen run ${view.run.number}` : 'Working run'} of{' '}
              {formatInstant(view.run.computedAt)}
              {view.run.isAccepted ? ', accepted by an engineer' : ', not accepted by an engineer'}.{' '}
              {view.run.isOutOfDate && (
                <strong>The record has changed since: the working run differs from this one. </strong>
              )}
              <Link
                to={`/sites/${site.slug}/balance/${month}${view.run.kind === 'frozen' ? `?run=${view.run.id}` : ''}`}
              >
                See the balance
              </Link>
            </>
          )
        }
      />
      <Viewed query={query}>
        {(data) => (
          <>
            <div className="flex flex-wrap gap-2 mb-5 no-print" role="group" aria-label="Cell">
              {data.cells.map((one) => (
                <button
                  key={one.code}
                  type="button"
                  className="choice !w-auto"
                  aria-pressed={data.cell.code === one.code}
                  onClick={() => choose('cell', one.code)}
                >
                  {one.code} {one.name}
                </button>
              ))}
            </div>
            {data.rows.length === 0 ? (
              <Empty>
                No month has a balance yet.{' '}
                <Link to={`/sites/${site.slug}/balance/${month}`}>Look at Balance</Link> to see what it needs.
              </Empty>
            ) : (
              <>
                <Findings view={data} />
                <div
                  className="flex flex-wrap gap-2 mt-8 mb-4 items-center no-print"
                  role="group"
                  aria-label="What is shown"
                >
                  <button
                    type="button"
                    className="choice !w-auto"
                    aria-pressed={!isRolling}
                    onClick={() => choose('view', null)}
                  >
                    Months
                  </button>
                  <button
                    type="button"
                    className="choice !w-auto"
                    aria-pressed={isRolling}
                    onClick={() => choose('view', 'rolling')}
                  >
                    Rolling twelve and cumulative
                  </button>
                  {!isRolling && (
                    <button
                      type="button"
                      className="link min-h-12"
                      onClick={() => choose('months', monthCount === 12 ? '36' : null)}
                    >
                      {monthCount === 12 ? 'Show three years' : 'Show one year'}
                    </button>
                  )}
                  <button type="button" className="link min-h-12 ml-auto" onClick={() => window.print()}>
                    Print one year
                  </button>
                </div>
                {isRolling ? <RollingTable view={data} /> : <MonthTable view={data} onOpen={setOpen} />}
                {!isRolling && (
                  <Section
                    title="In every unit"
                    aside={`to ${monthName(data.rows.at(-1)!.month)}; months without a reading count on neither side`}
                  >
                    <PeriodTable view={data} />
                  </Section>
                )}
                <Section title="What is compared">
                  {data.net && <NetLine net={data.net} />}
                  <p className="max-w-[80ch]">
                    Pumped is what left the cell’s sump, gross of any liquid returned to it
                    {data.receivedM3 > 0 &&
                      `, less ${formatM3(data.receivedM3)} m³ of condensate and wash-down led to the sump`}
                    . Liquid standing in the sump is{' '}
                    {data.sumpStorageCount > 0
                      ? `counted in ${data.sumpStorageCount} of ${data.rows.length} months, where its level was read`
                      : 'not counted: it needs the sump’s dimensions and its levels'}
                    . Where cells share a header the meter’s volume is split by the shares in force; such
                    numbers carry the mark ⊕. A small difference is not a proof that a liner is sound.
                  </p>
                </Section>
              </>
            )}
            <MonthNote
              cell={data.cell}
              row={data.rows.find((row) => row.month === open)}
              onClose={() => setOpen(null)}
            />
          </>
        )}
      </Viewed>
    </div>
  );
}
