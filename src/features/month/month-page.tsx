import { useParams, Link } from 'react-router';
import { useState } from 'react';
import { monthName } from '#shared/calendar/month.ts';
import type { DayState, MonthLine, MonthView, StripView } from '#shared/views/month-view.ts';
import { closeMonthInput, reopenMonthInput } from '#shared/schemas/lab.ts';
import { Glass } from '../../app/month-strip.tsx';
import { usePlace } from '../../app/place.ts';
import { RecordForm, TextField } from '../../components/form.tsx';
import { PageHead, ScrollBox, Section, TwoColumns } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { formatInstant } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useRecord, useWrite } from '../../lib/record.ts';
import { CellTable } from './cell-table.tsx';

const seriesColour = {
  rain: 'var(--color-s-rain)',
  pumped: 'var(--color-s-pumped)',
  effluent: 'var(--color-s-effluent)',
};

const stateWords: Record<DayState, string> = {
  read: 'read',
  apportioned: 'apportioned',
  estimated: 'estimated',
  'not-read': 'not read, reason given',
  missing: 'missing',
  held: 'held',
  none: 'nothing expected',
};

/** One record of one day: filled when read, half when apportioned, dashed when estimated, crossed when missing. */
function DayMark({ state, colour }: { state: DayState; colour: string }) {
  if (state === 'none') return <svg aria-hidden width="14" height="14" />;
  return (
    <svg aria-hidden width="14" height="14" viewBox="0 0 14 14">
      {state === 'read' && <rect x="2" y="2" width="10" height="10" fill={colour} />}
      {state === 'apportioned' && (
        <>
          <rect x="2.5" y="2.5" width="9" height="9" fill="#fff" stroke={colour} />
          <path d="M2 12 L12 12 L2 2 Z" fill={colour} />
        </>
      )}
      {state === 'estimated' && (
        <rect x="2.5" y="2.5" width="9" height="9" fill="#fff" stroke={colour} strokeDasharray="2 2" />
      )}
      {state === 'not-read' && (
        <rect x="2.5" y="2.5" width="9" height="9" fill="var(--color-sunken)" stroke="var(--color-edge)" />
      )}
      {state === 'missing' && (
        <>
          <rect x="2.5" y="2.5" width="9" height="9" fill="#fff" stroke="var(--color-error)" />
          <path d="M4 4 L10 10 M10 4 L4 10" stroke="var(--color-error)" strokeWidth="1.5" />
        </>
      )}
      {state === 'held' && (
        <>
          <rect x="2.5" y="2.5" width="9" height="9" fill="var(--color-warn-bg)" stroke="var(--color-warn)" />
          <text x="7" y="10.5" textAnchor="middle" fontSize="9" fontWeight="600" fill="var(--color-warn)">
            ?
          </text>
        </>
      )}
    </svg>
  );
}

function Grid({ view }: { view: MonthView }) {
  const days = view.grid[0]?.days.length ?? 0;
  const shown = [...new Set(view.grid.flatMap((line) => line.days))].filter((state) => state !== 'none');
  if (!days)
    return (
      <Empty>
        No gauge, meter or level is set up yet. Start under <Link to="../site">Site</Link>.
      </Empty>
    );
  return (
    <>
      <ScrollBox label="Records of the month by day and source">
        <table className="tbl tbl-tight">
          <caption className="sr-only">Records of {view.title} by day and source</caption>
          <thead>
            <tr>
              <th scope="col">Source</th>
              {Array.from({ length: days }, (_, index) => (
                <th key={index} scope="col" className="!px-0 text-center min-w-[20px]">
                  <span className={(index + 1) % 5 === 0 || index === 0 ? '' : 'sr-only'}>{index + 1}</span>
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {view.grid.map((line) => (
              <tr key={line.name}>
                <th scope="row" className="whitespace-nowrap">
                  {line.name}
                </th>
                {line.days.map((state, index) => (
                  <td key={index} className="!px-0 !text-center">
                    <span className="sr-only">{stateWords[state]}</span>
                    <span className="inline-block align-middle">
                      <DayMark state={state} colour={seriesColour[line.series]} />
                    </span>
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollBox>
      <p className="hint mt-2 flex flex-wrap gap-x-5">
        {shown.map((state) => (
          <span key={state} className="inline-flex items-center gap-1.5">
            <DayMark state={state} colour="var(--color-muted)" /> {stateWords[state]}
          </span>
        ))}
        <span>blank: nothing expected</span>
      </p>
    </>
  );
}

function Lines({ lines, slug, nothing }: { lines: MonthLine[]; slug: string; nothing: string }) {
  if (!lines.length) return <p className="sheet pad">{nothing}</p>;
  return (
    <ul className="sheet lines list-none px-4 md:px-6">
      {lines.map((line) => (
        <li key={line.subject + line.sentence} className="flex flex-wrap gap-x-6 gap-y-1">
          <p className="flex-1 min-w-[220px]">
            <span className="font-semibold">{line.subject}</span> {line.sentence}
          </p>
          {line.link && (
            <Link to={`/sites/${slug}/${line.link}`} className="font-medium">
              {line.linkText}
            </Link>
          )}
        </li>
      ))}
    </ul>
  );
}

function Next({ view, siteId, slug }: { view: MonthView; siteId: string; slug: string }) {
  const { can } = usePlace();
  const [isOpen, setIsOpen] = useState(false);
  const close = useWrite(siteId, `/months/${view.month}/closing`);
  const reopen = useWrite(siteId, `/months/${view.month}/reopening`);
  const first = view.missing.find((line) => line.link?.startsWith('round'));
  const isClosed = view.act?.act === 'close';
  return (
    <div className="sheet pad grid gap-3">
      <h2>Next</h2>
      {isClosed && (
        <p>
          {view.title} was closed on {formatInstant(view.act!.at)}. Nothing is posted here; a change waits
          until the month is reopened.
        </p>
      )}
      {!isClosed && view.obstacles.length > 0 && (
        <ul className="list-disc pl-5">
          {view.obstacles.map((one) => (
            <li key={one}>{one}</li>
          ))}
        </ul>
      )}
      {!isClosed && first && (
        <p>
          <Link className="btn w-full" to={`/sites/${slug}/${first.link}`}>
            {first.linkText}: {first.subject.replace(/\.$/, '')}
          </Link>
        </p>
      )}
      {!isClosed && view.obstacles.length === 0 && can('close:month') && (
        <>
          <p>
            {view.missing.length
              ? `${view.missing.length} things are missing. The month can be closed with them: they stay marked.`
              : 'Every expected record is in. The month can be closed.'}
          </p>
          <RecordForm<{ id: string; reason: string }>
            schema={closeMonthInput}
            defaults={{ id: newId(), reason: '' }}
            submitLabel={`Close ${monthName(view.month)}`}
            onSubmit={(values) => close.mutateAsync(values)}
          >
            <TextField
              name="reason"
              label="Note"
              hint="Needed when you made an estimate in this month yourself."
              isOptional
              isLong
            />
          </RecordForm>
        </>
      )}
      {isClosed &&
        can('reopen:month') &&
        (isOpen ? (
          <RecordForm<{ id: string; reason: string }>
            schema={reopenMonthInput}
            defaults={{ id: newId(), reason: '' }}
            submitLabel={`Reopen ${monthName(view.month)}`}
            onSubmit={(values) => reopen.mutateAsync(values)}
            onDone={() => setIsOpen(false)}
          >
            <TextField name="reason" label="Reason for reopening" isLong />
          </RecordForm>
        ) : (
          <p>
            <button type="button" className="btn btn-second" onClick={() => setIsOpen(true)}>
              Reopen this month
            </button>
          </p>
        ))}
      {view.act?.act === 'reopen' && (
        <p className="hint">
          Reopened on {formatInstant(view.act.at)}: {view.act.reason}
        </p>
      )}
    </div>
  );
}

function YearSoFar({ strip }: { strip: StripView }) {
  const seen = strip.months.filter((row) => !row.isFuture);
  const words = (row: StripView['months'][number]) =>
    row.lid === 'closed'
      ? 'closed'
      : row.lid === 'ajar'
        ? 'reopened'
        : row.isRunning
          ? 'in progress'
          : 'open';
  return (
    <div className="sheet pad mt-8">
      <h2 className="mb-2">The year so far</h2>
      <ul className="list-none">
        {seen.map((row) => (
          <li key={row.month} className="flex items-center gap-4 py-1.5 border-b border-line last:border-0">
            <Glass month={row} />
            <p>
              <span className="font-medium">{monthName(row.month)}</span>
              <span className="hint block">{words(row)}</span>
            </p>
          </li>
        ))}
      </ul>
    </div>
  );
}

/** The month at a glance: what is missing, what is wrong or odd, what is next. */
export function MonthPage() {
  const { month = '' } = useParams();
  const { site } = usePlace();
  const query = useRecord<MonthView>(site.id, `/months/${month}`);
  const strip = useRecord<StripView>(site.id, `/strip/${month}`);
  const sentence =
    query.data &&
    `${query.data.missing.length === 0 ? 'Nothing is missing.' : `${query.data.missing.length} ${query.data.missing.length === 1 ? 'thing is' : 'things are'} missing.`} ${query.data.odd.length ? `${query.data.odd.length} to look at.` : 'Nothing odd.'} ${query.data.act?.act === 'close' ? 'Closed.' : query.data.act?.act === 'reopen' ? 'Reopened.' : 'Not closed.'}`;
  return (
    <>
      <PageHead title={monthName(month)} sentence={sentence} />
      <Viewed query={query}>
        {(view) => (
          <TwoColumns
            left={
              <>
                <Section title="Missing">
                  <Grid view={view} />
                  <div className="mt-4">
                    <Lines
                      lines={view.missing}
                      slug={site.slug}
                      nothing="Every expected record of the month is in."
                    />
                  </div>
                </Section>
                <Section title="Wrong, or odd">
                  <Lines lines={view.odd} slug={site.slug} nothing="Nothing stands out this month." />
                </Section>
                <Section title="Leachate of the month">
                  <CellTable view={view} slug={site.slug} units={site.displayUnits} />
                </Section>
              </>
            }
            right={
              <>
                <Next view={view} siteId={site.id} slug={site.slug} />
                {strip.data && <YearSoFar strip={strip.data} />}
              </>
            }
          />
        )}
      </Viewed>
    </>
  );
}
