import { useState } from 'react';
import { Link, useParams } from 'react-router';
import { dayName } from '#shared/calendar/day.ts';
import { columnLetter } from '#shared/sheets/sheet.ts';
import type { LabRowState } from '#shared/lab/lab-row.ts';
import type { LabImportView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, ScrollBox, Section } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { Word, type Look } from '../../components/words.tsx';
import { formatResult } from '../../lib/format-quantity.ts';
import { useRecord, useWrite } from '../../lib/record.ts';
import { QuestionList } from './question-list.tsx';

type Row = LabImportView['rows'][number];

/** Kind of a row for the strip, the counts and the filter: one set of words. */
type Kind = 'new' | 'noticed' | 'changed' | 'held' | 'left out';
const kindOf = (row: Row): Kind =>
  row.state === 'held'
    ? 'held'
    : row.state === 'skipped'
      ? 'left out'
      : row.supersedesId
        ? 'changed'
        : row.state === 'warned'
          ? 'noticed'
          : 'new';
const kinds: Record<Kind, { look: Look; fill: string; stroke: string; mark: string; words: string }> = {
  new: {
    look: 'good',
    fill: 'var(--color-s-effluent)',
    stroke: 'var(--color-s-effluent)',
    mark: '',
    words: 'new results',
  },
  noticed: {
    look: 'note',
    fill: '#fff',
    stroke: 'var(--color-s-effluent)',
    mark: '•',
    words: 'new, with something to notice',
  },
  changed: {
    look: 'ask',
    fill: '#fff',
    stroke: 'var(--color-s-effluent)',
    mark: '/',
    words: 'changed values',
  },
  held: { look: 'ask', fill: 'var(--color-warn-bg)', stroke: 'var(--color-warn)', mark: '?', words: 'held' },
  'left out': {
    look: 'open',
    fill: 'var(--color-sunken)',
    stroke: 'var(--color-edge)',
    mark: '',
    words: 'not written: quality control or already here',
  },
};

function Strip({ rows }: { rows: readonly Row[] }) {
  const count = (kind: Kind) => rows.filter((row) => kindOf(row) === kind).length;
  const shown = (Object.keys(kinds) as Kind[]).filter((kind) => count(kind) > 0);
  return (
    <div className="sheet pad">
      {rows.length <= 400 && (
        <div aria-hidden className="flex flex-wrap gap-[3px] mb-3">
          {rows.map((row) => {
            const { fill, stroke, mark } = kinds[kindOf(row)];
            return (
              <span
                key={row.sheet + row.cell}
                className="w-[14px] h-[22px] text-xs leading-5 text-center font-semibold text-ink border"
                style={{ background: fill, borderColor: stroke }}
              >
                {mark}
              </span>
            );
          })}
        </div>
      )}
      <ul className="flex flex-wrap gap-x-6 gap-y-1 list-none">
        {shown.map((kind) => (
          <li key={kind} className="flex items-center gap-2">
            <span
              aria-hidden
              className="w-[14px] h-[18px] text-xs text-center leading-4 border"
              style={{ background: kinds[kind].fill, borderColor: kinds[kind].stroke }}
            >
              {kinds[kind].mark}
            </span>
            <span>
              <strong>{count(kind)}</strong> {kinds[kind].words}
            </span>
          </li>
        ))}
      </ul>
    </div>
  );
}

function Preview({ view }: { view: LabImportView }) {
  const { reading } = view;
  const columnCount = Math.max(...reading.preview.map((row) => row.cells.length), 1);
  return (
    <>
      <ScrollBox label="The sheet as it looks">
        <table className="tbl tbl-tight">
          <caption className="sr-only">First rows of sheet {reading.sheetName}</caption>
          <thead>
            <tr>
              <th scope="col">
                <span className="sr-only">Row</span>
              </th>
              {Array.from({ length: columnCount }, (_, index) => (
                <th key={index} scope="col">
                  {columnLetter(index)}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {reading.preview.map((row) => (
              <tr key={row.number} className={row.number === reading.headerRow ? 'font-semibold' : ''}>
                <th scope="row" className="text-muted">
                  {row.number}
                </th>
                {Array.from({ length: columnCount }, (_, index) => (
                  <td key={index}>{row.cells[index] ?? ''}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollBox>
      <p className="hint mt-2">
        Sheet “{reading.sheetName}”, the first {reading.preview.length} rows. Header in row{' '}
        {reading.headerRow}. Read as{' '}
        {reading.shape === 'crosstab' ? 'parameters against sampling dates' : 'a long list, one result a row'}
        {reading.jobNumber ? `; laboratory job ${reading.jobNumber}` : ''}.
      </p>
    </>
  );
}

function HowRead({ view }: { view: LabImportView }) {
  const { reading } = view;
  const noticed = view.rows.filter((row) => row.state === 'warned' && row.messages.length);
  return (
    <div className="grid gap-x-8 gap-y-4 lg:grid-cols-2 items-start">
      <div className="sheet pad">
        <ul className="list-disc pl-5 grid gap-1">
          {reading.notes.map((note) => (
            <li key={note}>{note}</li>
          ))}
          {reading.qualifierKey.map((one) => (
            <li key={one.letter}>
              The sheet says: {one.letter} = {one.words}
            </li>
          ))}
          {reading.dateOrder && (
            <li>
              Dates are read with the {reading.dateOrder === 'day-first' ? 'day' : 'month'} first, your
              answer.
            </li>
          )}
          {reading.skipped.length > 0 && (
            <li>
              {reading.skipped.length} rows are not results:{' '}
              {reading.skipped
                .slice(0, 4)
                .map((row) => `row ${row.rowNumber} “${row.text.slice(0, 40)}” (${row.why})`)
                .join('; ')}
              {reading.skipped.length > 4 ? ' …' : ''}
            </li>
          )}
          <li>
            SHA-256 of the file: <span className="break-all">{view.fileSha256}</span>
          </li>
        </ul>
      </div>
      {noticed.length > 0 && (
        <ScrollBox label="Read differently from how it looks">
          <table className="tbl tbl-tight">
            <caption className="sr-only">Cells read differently from how they look</caption>
            <thead>
              <tr>
                <th scope="col">Cell</th>
                <th scope="col">In the sheet</th>
                <th scope="col">Read as, and why</th>
              </tr>
            </thead>
            <tbody>
              {noticed.slice(0, 30).map((row) => (
                <tr key={row.sheet + row.cell}>
                  <th scope="row">{row.cell}</th>
                  <td>
                    {row.resultText} {row.unitText}
                  </td>
                  <td>{row.messages.join(' ')}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </ScrollBox>
      )}
    </div>
  );
}

const shownMax = 200;
const stateFilters: { value: LabRowState | 'all'; label: string }[] = [
  { value: 'all', label: 'all' },
  { value: 'ok', label: 'new' },
  { value: 'warned', label: 'noticed and changed' },
  { value: 'held', label: 'held' },
  { value: 'skipped', label: 'left out' },
];

function Rows({ rows }: { rows: readonly Row[] }) {
  const [filter, setFilter] = useState<LabRowState | 'all'>('all');
  const shown = rows.filter((row) => filter === 'all' || row.state === filter);
  return (
    <>
      <div className="flex flex-wrap gap-2 mb-3 no-print" role="group" aria-label="Show only">
        {stateFilters.map((one) => (
          <button
            key={one.value}
            type="button"
            className="choice !w-auto"
            aria-pressed={filter === one.value}
            onClick={() => setFilter(one.value)}
          >
            {one.label}
          </button>
        ))}
      </div>
      <ScrollBox label="Rows of the file">
        <table className="tbl tbl-tight">
          <caption className="sr-only">Rows of the file and what will be written</caption>
          <thead>
            <tr>
              <th scope="col">Row</th>
              <th scope="col">Point, parameter</th>
              <th scope="col">Sampled</th>
              <th scope="col" className="r">
                Will be
              </th>
              <th scope="col">Verdict</th>
            </tr>
          </thead>
          <tbody>
            {shown.slice(0, shownMax).map((row) => {
              const kind = kindOf(row);
              return (
                <tr key={row.sheet + row.cell}>
                  <th scope="row">
                    {row.rowNumber}
                    <span className="hint block">{row.cell}</span>
                  </th>
                  <td>
                    {row.pointCode ?? row.pointText}
                    <span className="block">
                      {row.analyteName ?? row.analyteText} {row.fraction}
                    </span>
                  </td>
                  <td className="whitespace-nowrap">
                    {row.sampledOn ? dayName(row.sampledOn) : row.sampledText}
                  </td>
                  <td className="r">
                    {kind === 'left out' ? (
                      <span className="text-muted">{row.resultText}</span>
                    ) : row.value === null ? (
                      <span className="text-muted">{row.missingReason ?? row.resultText}</span>
                    ) : (
                      `${formatResult(row)} ${row.unit}`
                    )}
                    {row.supersedesWords && <span className="hint block">was {row.supersedesWords}</span>}
                  </td>
                  <td>
                    <Word look={kinds[kind].look}>
                      {kind === 'noticed' ? 'New, noticed' : kind[0]!.toUpperCase() + kind.slice(1)}
                    </Word>
                    {row.messages.length > 0 && <span className="hint block">{row.messages.join(' ')}</span>}
                  </td>
                </tr>
              );
            })}
          </tbody>
        </table>
      </ScrollBox>
      {shown.length > shownMax && (
        <p className="hint mt-2">
          The first {shownMax} of {shown.length} rows are shown; all were read and counted.
        </p>
      )}
    </>
  );
}

function Act({ view }: { view: LabImportView }) {
  const { site, can } = usePlace();
  const confirm = useWrite<
    Record<string, never>,
    { writtenCount: number; heldCount: number; exceedanceCount: number }
  >(site.id, `/lab-imports/${view.id}/confirmation`);
  const undo = useWrite<Record<string, never>>(site.id, `/lab-imports/${view.id}/undo`);
  const { month = '' } = useParams();
  if (!can('upload:results')) return null;
  const writeCount = view.counts.ok + view.counts.warned;
  const error = confirm.error ?? undo.error;
  return (
    <div className="mt-6 grid gap-3 no-print" role="status">
      {confirm.data && (
        <p className="box box-done">
          {confirm.data.writtenCount} results were written, {confirm.data.heldCount} stay held
          {confirm.data.exceedanceCount
            ? `. ${confirm.data.exceedanceCount} exceedance${confirm.data.exceedanceCount === 1 ? ' was' : 's were'} opened, with the clock running`
            : ''}
          .
        </p>
      )}
      {error && (
        <p role="alert" className="error-text">
          ⚠ {error.document.detail}
        </p>
      )}
      {view.undoneAt ? (
        <p>This upload was undone. The file and its rows are kept.</p>
      ) : view.confirmedAt ? (
        <p>
          <button
            type="button"
            className="btn btn-second"
            disabled={undo.isPending}
            onClick={() => undo.mutate({})}
          >
            Undo this import
          </button>{' '}
          <span className="hint">Every value it wrote is voided, not erased.</span>
        </p>
      ) : writeCount === 0 ? (
        <p>No row can be written yet. Answer the questions above, or leave the upload as it is.</p>
      ) : (
        <div className="flex flex-wrap gap-3 items-center">
          <button
            type="button"
            className="btn"
            disabled={confirm.isPending}
            onClick={() => confirm.mutate({})}
          >
            Write {writeCount} {writeCount === 1 ? 'result' : 'results'}
          </button>
          <Link className="btn btn-second" to={`/sites/${site.slug}/lab/${month}`}>
            Leave without writing
          </Link>
          <span className="hint">One step, and it can be undone. Held rows stay with this upload.</span>
        </div>
      )}
    </div>
  );
}

/** An uploaded sheet in three bands: as it looks, how it is read, what will be written. */
export function LabCheckPage() {
  const { importId = '' } = useParams();
  const { site } = usePlace();
  const query = useRecord<LabImportView>(site.id, `/lab-imports/${importId}`);
  const view = query.data;
  const sentence =
    view &&
    (view.undoneAt
      ? `${view.counts.read} rows; undone.`
      : view.confirmedAt
        ? `${view.counts.read} rows, written. ${view.counts.held} are held.`
        : `${view.counts.read} rows. ${view.counts.held ? `${view.counts.held} are held and need an answer; the rest can be written without them.` : 'None is held.'} Nothing is stored yet.`);
  return (
    <>
      <PageHead
        title={view?.confirmedAt ? 'Laboratory upload' : 'Check before it is written'}
        sentence={sentence}
        crumb={view && <span className="break-all">{view.fileName}</span>}
      />
      <Viewed query={query}>
        {(data) => (
          <>
            <Section title="The sheet as it looks">
              <Preview view={data} />
            </Section>
            <Section title="How it is read">
              <HowRead view={data} />
            </Section>
            <Section title="What will be written">
              <Strip rows={data.rows} />
            </Section>
            {!data.confirmedAt && (
              <Section title="Held" aside="an answer is remembered for this laboratory">
                <QuestionList view={data} />
              </Section>
            )}
            <Act view={data} />
            <Section title="Rows">
              <Rows rows={data.rows} />
            </Section>
          </>
        )}
      </Viewed>
    </>
  );
}
