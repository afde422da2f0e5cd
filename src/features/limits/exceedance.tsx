import { useState } from 'react';
import { clockDoneInput, exceedanceCloseInput, exceedanceNoteInput } from '#shared/schemas/lab.ts';
import type { LimitsView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { RecordForm, TextField } from '../../components/form.tsx';
import { ScrollBox } from '../../components/page.tsx';
import { Word } from '../../components/words.tsx';
import { formatInstant } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';

type ExceedanceView = LimitsView['exceedances'][number];
type Clock = ExceedanceView['clocks'][number];

function leftWords(dueAt: string, now: string): string {
  const minutes = Math.round((Date.parse(dueAt) - Date.parse(now)) / 60_000);
  const size = Math.abs(minutes);
  const words =
    size >= 2 * 1440
      ? `${Math.floor(size / 1440)} days`
      : size >= 60
        ? `${Math.floor(size / 60)} h ${size % 60} min`
        : `${size} min`;
  return minutes >= 0 ? `${words} left` : `${words} over`;
}

/** From seen to due, and where now is. */
function ClockBar({ seenAt, clock, now }: { seenAt: string; clock: Clock; now: string }) {
  const [from, to, at] = [Date.parse(seenAt), Date.parse(clock.dueAt), Date.parse(now)];
  const share = Math.min(1, Math.max(0, (at - from) / (to - from || 1)));
  return (
    <div className="max-w-[480px]">
      <p className="font-semibold">
        {clock.step}: {leftWords(clock.dueAt, now)}
      </p>
      <div aria-hidden className="h-2.5 bg-line mt-1">
        <div className="h-2.5 bg-error" style={{ width: `${share * 100}%` }} />
      </div>
      <p className="hint flex flex-wrap justify-between gap-x-3">
        <span>seen {formatInstant(seenAt)}</span>
        <span>due {formatInstant(clock.dueAt)}</span>
      </p>
    </div>
  );
}

type Doing = { kind: 'clock'; clock: Clock } | { kind: 'note' } | { kind: 'close' };

/** An exceedance with its clocks, what was done, and its closing. */
export function Exceedance({ exceedance, now }: { exceedance: ExceedanceView; now: string }) {
  const { site, can } = usePlace();
  const [doing, setDoing] = useState<Doing | null>(null);
  const base = `/exceedances/${exceedance.id}`;
  const finish = useWrite<{ note: string; clockId: string }>(
    site.id,
    (body) => `${base}/clocks/${body.clockId}`,
  );
  const addNote = useWrite<{ id: string; note: string }>(site.id, `${base}/notes`);
  const close = useWrite<{ cause: string }>(site.id, `${base}/closing`);
  const running = exceedance.clocks.find((clock) => !clock.doneAt);
  const done = () => setDoing(null);
  return (
    <article className={`box ${exceedance.closedAt ? '' : 'box-error !bg-surface'} grid gap-4`}>
      <div className="grid lg:grid-cols-2 gap-6">
        <div className="grid gap-3 content-start">
          <p>
            <Word look={exceedance.closedAt ? 'open' : 'bad'}>
              {exceedance.closedAt ? 'Exceedance, closed' : 'Exceedance'}
            </Word>
          </p>
          <p>
            <strong>{exceedance.sentence}</strong> Seen by {exceedance.seenBy}.
          </p>
          {!exceedance.isStanding && (
            <p className="box box-warn">
              As the record stands now, nothing exceeds here: the results behind it were undone or revised.
              Close it with that reason, or find the result again in Lab.
            </p>
          )}
          {running && !exceedance.closedAt && (
            <ClockBar seenAt={exceedance.seenAt} clock={running} now={now} />
          )}
          {exceedance.cause && <p>Cause: {exceedance.cause}</p>}
        </div>
        {exceedance.clocks.length === 0 && (
          <p className="hint">
            No step and no deadline was entered with this limit. Look in the permit what has to be done, and
            by when.
          </p>
        )}
        {exceedance.clocks.length > 0 && (
          <ScrollBox label={`Steps and when they are due: ${exceedance.sentence}`}>
            <table className="tbl tbl-tight">
              <caption className="sr-only">Steps after the exceedance</caption>
              <thead>
                <tr>
                  <th scope="col">Step</th>
                  <th scope="col">Due</th>
                  <th scope="col">State</th>
                </tr>
              </thead>
              <tbody>
                {exceedance.clocks.map((clock) => (
                  <tr key={clock.id}>
                    <th scope="row">
                      {clock.step}
                      <span className="hint block">{clock.citation}</span>
                    </th>
                    <td>{formatInstant(clock.dueAt)}</td>
                    <td>
                      {clock.doneAt ? (
                        <>
                          <Word look="good">Done</Word>
                          <span className="hint block">
                            {formatInstant(clock.doneAt)}, {clock.doneBy}: {clock.doneNote}
                          </span>
                        </>
                      ) : (
                        <>
                          <Word look={clock === running ? 'clock' : 'open'}>Open</Word>
                          {can('follow:exceedance') && !exceedance.closedAt && (
                            <button
                              type="button"
                              className="link block"
                              aria-label={`Record it: ${clock.step}`}
                              onClick={() => setDoing({ kind: 'clock', clock })}
                            >
                              Record it
                            </button>
                          )}
                        </>
                      )}
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </ScrollBox>
        )}
      </div>
      {exceedance.notes.length > 0 && (
        <ul className="list-disc pl-5">
          {exceedance.notes.map((note) => (
            <li key={note.id}>
              {formatInstant(note.writtenAt)}, {note.by}: {note.note}
            </li>
          ))}
        </ul>
      )}
      {can('follow:exceedance') && !exceedance.closedAt && (
        <p className="flex flex-wrap gap-3 no-print">
          <button type="button" className="btn btn-second" onClick={() => setDoing({ kind: 'note' })}>
            Add a note
          </button>
          <button type="button" className="btn btn-second" onClick={() => setDoing({ kind: 'close' })}>
            Close the exceedance
          </button>
        </p>
      )}
      <Panel
        title={
          doing?.kind === 'clock'
            ? doing.clock.step
            : doing?.kind === 'note'
              ? 'Add a note'
              : 'Close the exceedance'
        }
        isOpen={doing !== null}
        onClose={done}
      >
        {doing?.kind === 'clock' && (
          <RecordForm<{ note: string }>
            schema={clockDoneInput}
            defaults={{ note: '' }}
            submitLabel="Record it"
            onSubmit={(values) => finish.mutateAsync({ ...values, clockId: doing.clock.id })}
            onDone={done}
          >
            <TextField
              name="note"
              label="What was done"
              hint="Who was told, by whom, how; or the number of the sample."
              isLong
            />
          </RecordForm>
        )}
        {doing?.kind === 'note' && (
          <RecordForm<{ id: string; note: string }>
            schema={exceedanceNoteInput}
            defaults={{ id: newId(), note: '' }}
            submitLabel="Add the note"
            onSubmit={(values) => addNote.mutateAsync(values)}
            onDone={done}
          >
            <TextField name="note" label="Note" isLong />
          </RecordForm>
        )}
        {doing?.kind === 'close' && (
          <RecordForm<{ cause: string }>
            schema={exceedanceCloseInput}
            defaults={{ cause: '' }}
            submitLabel="Close it"
            onSubmit={(values) => close.mutateAsync(values)}
            onDone={done}
          >
            <TextField
              name="cause"
              label="Cause and what was done"
              hint="It is printed in the report of the quarter."
              isLong
            />
          </RecordForm>
        )}
      </Panel>
    </article>
  );
}
