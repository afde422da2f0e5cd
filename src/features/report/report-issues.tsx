import { useState } from 'react';
import { Link } from 'react-router';
import { dayName } from '#shared/calendar/day.ts';
import { quarterName } from '#shared/calendar/month.ts';
import { signReportInput } from '#shared/schemas/lab.ts';
import type { ReportView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { CheckField, RecordForm, TextField } from '../../components/form.tsx';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Word } from '../../components/words.tsx';
import { formatInstant, formatNumber } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';
import { counts } from './report-words.ts';

export function Signing({ view }: { view: ReportView }) {
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

export function Issues({ view }: { view: ReportView }) {
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
export function Changes({ view }: { view: ReportView }) {
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
