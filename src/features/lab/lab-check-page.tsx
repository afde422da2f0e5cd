import { counted } from '#shared/count-words.ts';
import { Link, useParams } from 'react-router';
import type { LabImportView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, Section } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { useRecord, useWrite } from '../../lib/record.ts';
import { QuestionList } from './question-list.tsx';
import { HowRead, Preview, Strip } from './check-bands.tsx';
import { Rows } from './check-rows.tsx';

function Act({ view }: { view: LabImportView }) {
  const { site, can } = usePlace();
  const confirm = useWrite<
    Record<string, never>,
    { writtenCount: number; heldCount: number; exceedanceCount: number }
  >(site.id, `/lab-imports/${view.id}/confirmation`);
  const undo = useWrite<Record<string, never>>(site.id, `/lab-imports/${view.id}/undo`);
  const reread = useWrite<Record<string, never>>(site.id, `/lab-imports/${view.id}/reading`, {
    onDone: () => confirm.reset(),
  });
  const discard = useWrite<Record<string, never>>(site.id, `/lab-imports/${view.id}/discard`);
  const { month = '' } = useParams();
  if (!can('upload:results')) return null;
  const writeCount = view.counts.ok + view.counts.warned;
  const error = confirm.error ?? undo.error ?? reread.error ?? discard.error;
  return (
    <div className="mt-6 grid gap-3 no-print" role="status">
      {confirm.data && (
        <p className="box box-done">
          {counted(confirm.data.writtenCount, 'result was', 'results were')} written,{' '}
          {counted(confirm.data.heldCount, 'row stays', 'rows stay')} held
          {confirm.data.exceedanceCount
            ? `. ${confirm.data.exceedanceCount} exceedance${confirm.data.exceedanceCount === 1 ? ' was' : 's were'} opened; Limits shows what is due`
            : ''}
          .
        </p>
      )}
      {error && (
        <p role="alert" className="error-text">
          ⚠ {error.document.detail}{' '}
          {error.kind === 'changed-meanwhile' && (
            <button type="button" className="link" onClick={() => reread.mutate({})}>
              Read it again
            </button>
          )}
        </p>
      )}
      {view.undoneAt ? (
        <p>
          This upload was {view.confirmedAt ? 'undone' : 'discarded unwritten'}. The file and its rows are
          kept.
        </p>
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
      ) : (
        <div className="flex flex-wrap gap-3 items-center">
          {writeCount === 0 ? (
            <p className="basis-full">
              No row can be written yet. Answer the questions above, or lay the upload aside.
            </p>
          ) : (
            <button
              type="button"
              className="btn"
              disabled={confirm.isPending}
              onClick={() => confirm.mutate({})}
            >
              Write {writeCount} {writeCount === 1 ? 'result' : 'results'}
            </button>
          )}
          <Link className="btn btn-second" to={`/sites/${site.slug}/lab/${month}`}>
            Leave without writing
          </Link>
          <button type="button" className="link min-h-12" onClick={() => discard.mutate({})}>
            Discard this upload
          </button>
          <span className="hint">One step, and it can be undone. Held rows stay with this upload.</span>
        </div>
      )}
    </div>
  );
}

/** An uploaded sheet in three bands: as it looks, how it is read, what will be written. */
export function LabCheckPage() {
  const { importId = '' } = useParams();
  const { site, can } = usePlace();
  const query = useRecord<LabImportView>(site.id, `/lab-imports/${importId}`);
  const view = query.data;
  const sentence =
    view &&
    (view.undoneAt
      ? `${view.counts.read} rows; ${view.confirmedAt ? 'undone' : 'discarded'}.`
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
            {!data.confirmedAt && !data.undoneAt && can('upload:results') && (
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
