import { useState } from 'react';
import { Link, useParams } from 'react-router';
import { dayName } from '#shared/calendar/day.ts';
import { monthName, monthShortName, quarterName } from '#shared/calendar/month.ts';
import { signReportInput } from '#shared/schemas/lab.ts';
import type { ReportView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { CheckField, RecordForm, TextField } from '../../components/form.tsx';
import { PageHead, ScrollBox, Section, TwoColumns } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { VerdictWord, Word } from '../../components/words.tsx';
import { formatInstant, formatM3, formatNumber, formatSigned } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useRecord, useWrite } from '../../lib/record.ts';

const stateWords = { ready: ['good', 'Ready'], stops: ['bad', 'Stops'], ask: ['ask', 'Ask'] } as const;

const counts = (view: ReportView) => ({
  stops: view.readiness.filter((line) => line.state === 'stops').length,
  ask: view.readiness.filter((line) => line.state === 'ask').length,
});

function stateSentence(view: ReportView): string {
  const { stops, ask } = counts(view);
  const last = view.issues.filter((one) => one.quarter === view.quarter).at(-1);
  if (last)
    return last.isStale
      ? `Issue ${last.issue} was signed on ${dayName(last.signedAt.slice(0, 10))}; ${view.changes.length} of its numbers have changed since.`
      : `Issue ${last.issue} was signed on ${dayName(last.signedAt.slice(0, 10))} and says what the record says.`;
  return `${stops ? `${stops} ${stops === 1 ? 'thing stops' : 'things stop'} the signature` : 'Nothing stops the signature'}${ask ? `, ${ask} ${ask === 1 ? 'is' : 'are'} worth asking about` : ''}. ${view.due}`;
}

function Readiness({ view }: { view: ReportView }) {
  const { site } = usePlace();
  const { stops } = counts(view);
  return (
    <Section
      title={
        stops
          ? `Can it be signed? Not yet: ${stops} ${stops === 1 ? 'thing stops' : 'things stop'} it`
          : 'Can it be signed? Yes'
      }
    >
      <ul className="sheet lines px-4 list-none">
        {view.readiness.map((line) => (
          <li key={line.sentence} className="flex flex-wrap gap-x-4 gap-y-1 items-baseline">
            <span className="w-[80px]">
              <Word look={stateWords[line.state][0]}>{stateWords[line.state][1]}</Word>
            </span>
            <span className="flex-1 min-w-[220px]">{line.sentence}</span>
            {line.link && (
              <Link
                className="ml-auto"
                to={`/sites/${site.slug}/${line.link}`}
                aria-label={`Look at it: ${line.sentence}`}
              >
                Look at it
              </Link>
            )}
          </li>
        ))}
      </ul>
    </Section>
  );
}

function VolumeTable({ view }: { view: ReportView }) {
  const of = (code: string, month: string) =>
    view.cellMonths.find((one) => one.cellCode === code && one.month === month);
  const sum = (rows: ReportView['cellMonths'], pick: (row: ReportView['cellMonths'][number]) => number) =>
    rows.reduce((total, row) => total + pick(row), 0);
  const line = (name: string, rows: (month: string) => ReportView['cellMonths']) => {
    const all = view.months.flatMap(rows);
    const predicted = sum(all, (row) => row.predictedM3);
    const measured = sum(all, (row) => row.measuredM3 ?? 0);
    return (
      <>
        <th scope="row">{name}</th>
        {view.months.map((month) => {
          const own = rows(month);
          const isRead = own.some((row) => row.measuredM3 !== null);
          return [
            <td key={`${month}p`} className="r">
              {formatM3(sum(own, (row) => row.predictedM3))}
            </td>,
            <td key={`${month}m`} className="r">
              {isRead ? (
                <>
                  {own.some((row) => row.estimatedM3 > 0) && '◌ '}
                  {own.some((row) => row.allocatedM3 > 0) && '⊕ '}
                  {formatM3(sum(own, (row) => row.measuredM3 ?? 0))}
                </>
              ) : (
                'not read'
              )}
            </td>,
          ];
        })}
        <td className="r font-semibold">{formatM3(predicted)}</td>
        <td className="r font-semibold">{formatM3(measured)}</td>
        <td className="r font-semibold">{formatSigned(measured - predicted)}</td>
      </>
    );
  };
  return (
    <ScrollBox label="Leachate, predicted and pumped">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Leachate by cell, predicted and pumped, m³</caption>
        <thead>
          <tr>
            <th scope="col">Leachate, m³</th>
            {view.months.flatMap((month) => [
              <th key={`${month}p`} scope="col" className="r">
                {monthShortName(month)} predicted
              </th>,
              <th key={`${month}m`} scope="col" className="r">
                {monthShortName(month)} pumped
              </th>,
            ])}
            <th scope="col" className="r">
              Quarter predicted
            </th>
            <th scope="col" className="r">
              Quarter pumped
            </th>
            <th scope="col" className="r">
              Quarter gap
            </th>
          </tr>
        </thead>
        <tbody>
          {view.cells.map((cell) => (
            <tr key={cell.code}>
              {line(`${cell.code} ${cell.name}`, (month) => {
                const row = of(cell.code, month);
                return row ? [row] : [];
              })}
            </tr>
          ))}
        </tbody>
        <tfoot>
          <tr>{line('Site', (month) => view.cellMonths.filter((one) => one.month === month))}</tr>
        </tfoot>
      </table>
    </ScrollBox>
  );
}

/** One row a limit, one column a month. */
function VerdictTable({ view }: { view: ReportView }) {
  const key = (row: ReportView['verdicts'][number]) =>
    `${row.pointCode} ${row.analyteName} ${row.statistic} ${row.quantity} ${row.limit}`;
  const limits = [...new Map(view.verdicts.map((row) => [key(row), row])).entries()];
  return (
    <ScrollBox label="Effluent against limits">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Effluent against limits by month</caption>
        <thead>
          <tr>
            <th scope="col">Parameter</th>
            <th scope="col" className="r">
              Limit
            </th>
            {view.months.map((month) => (
              <th key={month} scope="col">
                {monthName(month)}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {limits.map(([id, first]) => (
            <tr key={id}>
              <th scope="row">
                {first.pointCode}, {first.analyteName}
                <span className="hint block">
                  {first.statistic.replace('-', ' ')}
                  {first.quantity === 'load' ? ', load' : ''}
                </span>
              </th>
              <td className="r">
                {first.limit} {first.unit}
              </td>
              {view.months.map((month) => {
                const row = view.verdicts.find((one) => key(one) === id && one.month === month);
                return (
                  <td key={month}>
                    {row ? (
                      <>
                        <VerdictWord word={row.word} /> <span className="hint">{row.valueText ?? ''}</span>
                      </>
                    ) : (
                      '–'
                    )}
                  </td>
                );
              })}
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

function LeakTable({ view }: { view: ReportView }) {
  return (
    <ScrollBox label="Leak detection">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Leak detection by sump and month</caption>
        <thead>
          <tr>
            <th scope="col">Sump</th>
            <th scope="col">Month</th>
            <th scope="col" className="r">
              Volume, m³
            </th>
            <th scope="col" className="r">
              Rate, L/ha·d
            </th>
            <th scope="col" className="r">
              Action rate, L/ha·d
            </th>
          </tr>
        </thead>
        <tbody>
          {view.leakDetection.map((row) => (
            <tr key={row.sumpCode + row.month}>
              <th scope="row">{row.sumpCode}</th>
              <td>{monthName(row.month)}</td>
              <td className="r">{row.volumeM3 === null ? 'not read' : formatNumber(row.volumeM3, 2)}</td>
              <td className="r">{row.lPerHaDay === null ? '–' : formatNumber(row.lPerHaDay, 1)}</td>
              <td className="r">
                {row.actionRateLPerHaDay === null ? 'none set' : formatNumber(row.actionRateLPerHaDay, 0)}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

function Signing({ view }: { view: ReportView }) {
  const { site, can } = usePlace();
  const [isOpen, setIsOpen] = useState(false);
  const sign = useWrite<{ id: string; isConfirmed: boolean; reason: string }>(
    site.id,
    `/reports/${view.quarter}`,
  );
  const { stops, ask } = counts(view);
  const own = view.issues.filter((one) => one.quarter === view.quarter);
  const isCurrent = own.length > 0 && !own.at(-1)!.isStale;
  return (
    <div className="sheet pad grid gap-3">
      <h2>Due {dayName(view.dueOn)}</h2>
      <p>{own.length ? `Issue 0 was signed on ${dayName(own[0]!.signedAt.slice(0, 10))}.` : view.due}</p>
      <h3>Signing</h3>
      {view.certification ? (
        <p className="hint">“{view.certification}”</p>
      ) : (
        <p>
          The words of the certification are not entered yet. They are the permit’s, entered under{' '}
          <Link to={`/sites/${site.slug}/site#settings`}>Site, settings</Link>; nothing is worded by the
          program.
        </p>
      )}
      {isCurrent ? (
        <p className="hint">Signed. A new issue is prepared when a number changes.</p>
      ) : stops ? (
        <p className="hint">
          The site manager can sign when the lines marked “Stops” are settled. Signing locks the three months.
        </p>
      ) : !can('sign:report') ? (
        <p className="hint">The site manager signs. Signing locks the three months.</p>
      ) : (
        view.certification && (
          <p>
            <button type="button" className="btn" onClick={() => setIsOpen(true)}>
              {own.length ? `Prepare issue ${own.length}` : 'Sign and issue'}
            </button>
          </p>
        )
      )}
      <p>
        <a
          className="btn btn-second"
          href={`/api/v1/sites/${site.id}/reports/${view.quarter}/preview`}
          download
        >
          Download the preview
        </a>
      </p>
      <p className="hint">An Excel workbook whose formulas recompute to this page.</p>
      <Panel
        title={`Sign ${quarterName(view.quarter)}, issue ${own.length}`}
        isOpen={isOpen}
        onClose={() => setIsOpen(false)}
      >
        <RecordForm<{ id: string; isConfirmed: boolean; reason: string }>
          schema={signReportInput}
          defaults={{ id: newId(), isConfirmed: false, reason: '' }}
          submitLabel="Sign and issue"
          onSubmit={(values) => sign.mutateAsync(values)}
          onDone={() => setIsOpen(false)}
        >
          <p className="box">{view.certification}</p>
          <CheckField
            name="isConfirmed"
            label="I have read the certification and sign it under my own name."
          />
          <TextField
            name="reason"
            label="Why it is signed with open questions"
            hint={
              ask ? `${ask} lines are marked “Ask”. The reason is printed in the report.` : 'Nothing is open.'
            }
            isOptional={ask === 0}
            isLong
          />
        </RecordForm>
      </Panel>
    </div>
  );
}

function Issues({ view }: { view: ReportView }) {
  const { site } = usePlace();
  return (
    <div className="sheet pad grid gap-3 mt-6">
      <h2>Issues</h2>
      {view.issues.length === 0 ? (
        <p className="text-muted">No report was issued yet.</p>
      ) : (
        <div className="scroll" role="region" aria-label="Issues" tabIndex={0}>
          <table className="tbl tbl-tight">
            <caption className="sr-only">Issued reports</caption>
            <thead>
              <tr>
                <th scope="col">Quarter, issue</th>
                <th scope="col">Signed</th>
                <th scope="col">State</th>
              </tr>
            </thead>
            <tbody>
              {[...view.issues].reverse().map((one) => (
                <tr key={one.id} className={one.quarter === view.quarter ? 'bg-tint' : ''}>
                  <th scope="row">
                    <Link to={`/sites/${site.slug}/report/${one.quarter}`}>
                      {one.quarter.slice(5)} {one.quarter.slice(0, 4)}, {one.issue}
                    </Link>
                    <a
                      className="block"
                      href={`/api/v1/sites/${site.id}/report-files/${one.id}`}
                      download
                      aria-label={`Download ${one.fileName}`}
                    >
                      Download
                    </a>
                  </th>
                  <td>
                    {dayName(one.signedAt.slice(0, 10))}
                    <span className="hint block">{one.signedBy}</span>
                  </td>
                  <td>
                    {one.isStale ? (
                      <Word look="ask">Stale</Word>
                    ) : one.isLast ? (
                      <Word look="good">Current</Word>
                    ) : (
                      <Word look="open">Superseded</Word>
                    )}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
      {view.issues
        .filter((one) => one.quarter === view.quarter)
        .map((one) => (
          <p key={one.id} className="hint break-all">
            Issue {one.issue}, {formatInstant(one.signedAt)}, SHA-256 {one.fileSha256}
          </p>
        ))}
    </div>
  );
}

/** What an issued report would say differently now; the issued file stays as it was. */
function Changes({ view }: { view: ReportView }) {
  if (!view.changes.length) return null;
  const decimals = (name: string) => (name.endsWith('m³') ? 0 : 3);
  const value = (name: string, number: number) =>
    Number.isFinite(number) ? formatNumber(number, decimals(name)) : 'none';
  return (
    <Section
      title={`Since issue ${view.issues.filter((one) => one.quarter === view.quarter).at(-1)?.issue}`}
      aside="the issued file stays as it was"
    >
      <ScrollBox label="Changes since the last issue">
        <table className="tbl tbl-tight">
          <caption className="sr-only">Numbers that would be printed differently now</caption>
          <thead>
            <tr>
              <th scope="col">Number</th>
              <th scope="col" className="r">
                Issued
              </th>
              <th scope="col" className="r">
                Now
              </th>
            </tr>
          </thead>
          <tbody>
            {view.changes.map((one) => (
              <tr key={one.name}>
                <th scope="row">{one.name}</th>
                <td className="r">{value(one.name, one.issued)}</td>
                <td className="r font-semibold">{value(one.name, one.now)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollBox>
    </Section>
  );
}

/** Readiness of the quarter in words, its numbers, signing and issues. */
export function ReportPage() {
  const { quarter = '' } = useParams();
  const { site } = usePlace();
  const query = useRecord<ReportView>(site.id, `/reports/${quarter}`);
  return (
    <>
      <PageHead
        title={`Report, ${quarterName(quarter)}`}
        sentence={query.data && stateSentence(query.data)}
        crumb={
          query.data &&
          `Predicted by ${query.data.run.kind === 'frozen' ? `frozen run ${query.data.run.number}${query.data.run.isAccepted ? ', accepted' : ''}` : 'the working run'}.`
        }
      />
      <Viewed query={query}>
        {(view) => (
          <>
            <TwoColumns
              left={
                <>
                  <Readiness view={view} />
                  <Changes view={view} />
                </>
              }
              right={
                <>
                  <Signing view={view} />
                  <Issues view={view} />
                </>
              }
            />
            <Section title="Leachate" aside="m³; ◌ estimated, ⊕ allocated in part">
              <VolumeTable view={view} />
            </Section>
            {view.leakDetection.length > 0 && (
              <Section title="Leak detection">
                <LeakTable view={view} />
              </Section>
            )}
            <Section title="Effluent against limits">
              {view.verdicts.length ? (
                <VerdictTable view={view} />
              ) : (
                <p className="text-muted">No limit is in force in this quarter.</p>
              )}
              <p className="hint mt-2">
                A computed pass is not a compliance determination. The permit and the laboratory’s report
                govern.
              </p>
            </Section>
          </>
        )}
      </Viewed>
    </>
  );
}
