import { useId, useState } from 'react';
import { Link, useParams } from 'react-router';
import { addDays, dayName, dayNameShort, weekday } from '#shared/calendar/day.ts';
import { notReadReasonNames } from '#shared/schemas/readings.ts';
import type { RoundPointView, RoundView } from '#shared/views/round-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, Section, TwoColumns } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { formatLocal } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { unitOf } from './meter-check.tsx';
import { MeterPoint } from './meter-point.tsx';
import { LevelPoint, LoadOut, RainPoint } from './other-points.tsx';
import { NotRead, SaveLine } from './point-parts.tsx';
import { useOutbox } from './use-outbox.ts';
import { useSave } from './use-save.ts';

/** Day a point that is not read daily is due again; null when it is due every day or was never read. */
const dueOn = (point: RoundPointView) =>
  point.everyDays > 1 && point.last ? addDays(point.last.at.slice(0, 10), point.everyDays) : null;

const stateOf = (point: RoundPointView, day: string) =>
  point.done.some((one) => one.state !== 'stored')
    ? 'ask'
    : point.done.length
      ? 'done'
      : point.notRead
        ? 'skipped'
        : (dueOn(point) ?? day) > day
          ? 'later'
          : 'open';

const circle = {
  ask: 'bg-warn-bg border-warn text-warn',
  done: 'bg-done-bg border-done text-done',
  skipped: 'border-dashed border-edge text-muted',
  later: 'border-dashed border-line text-muted',
  open: 'border-edge',
};

function PointValue({
  point,
  state,
  kept,
}: {
  point: RoundPointView;
  state: ReturnType<typeof stateOf>;
  kept: string | null;
}) {
  if (kept)
    return (
      <span className="text-right leading-tight">
        <span className="block font-medium">{kept}</span>
        <span className="hint">▣ saved on this phone</span>
      </span>
    );
  const last = point.done.at(-1);
  if (last) {
    return (
      <span className="text-right leading-tight">
        <span className="block font-medium">
          {last.text} {point.kind === 'meter' && unitOf(point)}
        </span>
        <span className="hint">
          {last.state === 'held'
            ? 'held, your answer'
            : last.state === 'dispute'
              ? 'two readings differ'
              : `${formatLocal(last.at).split(' ').at(-1)}, ${last.by}`}
        </span>
      </span>
    );
  }
  if (point.notRead)
    return (
      <span className="hint text-right">
        Not read: {notReadReasonNames[point.notRead.reasonCode as 'frozen']?.toLowerCase()}
      </span>
    );
  return <span className="hint">{state === 'later' ? `due ${dayNameShort(dueOn(point)!)}` : 'open'}</span>;
}

function PointRow({
  point,
  round,
  kept,
  isOpen,
  onOpen,
  onDone,
}: {
  point: RoundPointView;
  round: RoundView;
  /** What waits on this device for this point; null when nothing does. */
  kept: string | null;
  isOpen: boolean;
  onOpen: () => void;
  onDone: () => void;
}) {
  const [isSkipping, setIsSkipping] = useState(false);
  const { can } = usePlace();
  const state = stateOf(point, round.day);
  const panelId = useId();
  const parts = { point, round, isToday: round.day === round.today, onDone };
  return (
    <li
      className={`border-b border-line last:border-0 ${isOpen ? 'outline-2 outline-primary -outline-offset-1' : ''}`}
    >
      <button
        type="button"
        className="w-full grid grid-cols-[32px_minmax(0,1fr)_auto] gap-3 items-center min-h-16 px-3 md:px-4 py-2 text-left cursor-pointer"
        aria-expanded={isOpen}
        aria-controls={panelId}
        onClick={onOpen}
      >
        <span
          aria-hidden
          className={`size-7 rounded-full border grid place-items-center text-sm font-semibold ${isOpen ? 'bg-primary border-primary text-white' : circle[state]}`}
        >
          {point.position}
        </span>
        <span className="leading-tight">
          <span className="font-semibold block text-[18px] md:text-base">{point.name}</span>
          <span className="hint">
            {point.last
              ? `last ${point.last.text} ${unitOf(point)} on ${formatLocal(point.last.at)}`
              : 'never read'}
            {point.everyDays > 1 ? `, every ${point.everyDays} days` : ''}
          </span>
        </span>
        <PointValue point={point} state={state} kept={kept} />
      </button>
      {isOpen && (
        <div id={panelId} className="px-3 pb-4 md:pl-[60px] md:pr-4 grid gap-4">
          {can('create:reading') ? (
            isSkipping ? (
              <>
                <NotRead
                  pointId={point.id}
                  day={round.day}
                  name={point.name}
                  onDone={() => {
                    setIsSkipping(false);
                    onDone();
                  }}
                />
                <p>
                  <button type="button" className="link min-h-12" onClick={() => setIsSkipping(false)}>
                    Back to the reading
                  </button>
                </p>
              </>
            ) : (
              <>
                {point.kind === 'meter' && <MeterPoint {...parts} />}
                {point.kind === 'level' && <LevelPoint {...parts} />}
                {point.kind === 'rain' && <RainPoint {...parts} />}
                <p>
                  <button type="button" className="link min-h-12" onClick={() => setIsSkipping(true)}>
                    I could not read it
                  </button>
                </p>
              </>
            )
          ) : (
            <p className="hint">You read this page; entries are made by the operators.</p>
          )}
        </div>
      )}
    </li>
  );
}

function Handover({ round }: { round: RoundView }) {
  const [note, setNote] = useState('');
  const { state, save } = useSave('/round-notes', 'Handover');
  const { can } = usePlace();
  const id = useId();
  const today = round.notes.filter((note) => note.siteDay === round.day);
  return (
    <Section title="Handover">
      {today.length > 0 && (
        <ul className="lines list-none mb-3">
          {today.map((note) => (
            <li key={note.id}>
              {note.note} <span className="hint">{note.by}</span>
            </li>
          ))}
        </ul>
      )}
      {can('create:reading') && (
        <form
          className="grid gap-3"
          onSubmit={(event) => {
            event.preventDefault();
            void save({ siteDay: round.day, note }).then((answer) => answer && setNote(''));
          }}
        >
          <label className="hint" htmlFor={id}>
            What the next shift must know. They see this before anything else.
          </label>
          <textarea
            id={id}
            className="input"
            rows={3}
            value={note}
            onChange={(event) => setNote(event.target.value)}
          />
          <SaveLine state={state} />
          <button type="submit" className="btn btn-second">
            Hand over the round
          </button>
        </form>
      )}
    </Section>
  );
}

const cautions = [
  'A sump, manhole, wet well or tank can hold gas, or no oxygen. Nothing on this page permits entry: test the air, follow the site’s permit.',
  'Readings here are history, not the state of the plant now.',
];

/** The operator's list for a day, in walking order: one point open at a time. */
export function RoundPage() {
  const { day = '' } = useParams();
  const { site, can } = usePlace();
  const query = useRecord<RoundView>(site.id, `/round/${day}`);
  const [openId, setOpenId] = useState<string | null>(null);
  const [isLoading, setIsLoading] = useState(false);
  const round = query.data;
  const outbox = useOutbox(site.id);
  const keptOf = (point: RoundPointView) => {
    const item = outbox.findLast(
      ({ body }) =>
        body.roundPointId === point.id ||
        [body.meterId, body.storeId, body.stationId].includes(point.subjectId),
    );
    if (!item) return null;
    return String(item.body.registerText ?? item.body.levelText ?? item.body.depthText ?? 'not read');
  };
  const count = (state: ReturnType<typeof stateOf>) =>
    round?.points.filter((point) => stateOf(point, day) === state).length ?? 0;
  const sentence =
    round &&
    `${count('done')} of ${round.points.length - count('later')} points read${count('ask') ? `, ${count('ask')} open ${count('ask') === 1 ? 'question' : 'questions'}` : ''}${count('skipped') ? `, ${count('skipped')} not read` : ''}${count('later') ? `, ${count('later')} not due` : ''}.`;
  const next = (view: RoundView, after: RoundPointView) =>
    view.points.find((point) => point.position > after.position && stateOf(point, day) === 'open')?.id ??
    null;
  const dayLink = (target: string, label: string) => (
    <Link to={`/sites/${site.slug}/round/${target}`} className="btn btn-second">
      {label}
    </Link>
  );
  return (
    <>
      <PageHead title={`Round, ${weekday(day)} ${dayName(day)}`} sentence={sentence} />
      <nav aria-label="Days" className="flex flex-wrap gap-2 mb-4 no-print">
        {round && day !== round.today && dayLink(round.today, 'Today')}
        {dayLink(addDays(day, -1), 'The day before')}
        {round && day < round.today && dayLink(addDays(day, 1), 'The day after')}
      </nav>
      <Viewed query={query}>
        {(view) => (
          <TwoColumns
            left={
              <>
                {view.notes
                  .filter((note) => note.siteDay !== view.day)
                  .slice(0, 1)
                  .map((note) => (
                    <p key={note.id} className="box box-note mb-4">
                      <span className="font-semibold">
                        From the last shift, {dayName(note.siteDay)}, {note.by}:
                      </span>{' '}
                      {note.note}
                    </p>
                  ))}
                {view.points.length === 0 ? (
                  <Empty>
                    No point is set up for the round yet. An engineer adds meters, stores and gauges under
                    Site.
                  </Empty>
                ) : (
                  <ol className="sheet list-none">
                    {view.points.map((point) => (
                      <PointRow
                        key={point.id}
                        point={point}
                        round={view}
                        kept={keptOf(point)}
                        isOpen={openId === point.id}
                        onOpen={() => setOpenId(openId === point.id ? null : point.id)}
                        onDone={() =>
                          setOpenId((current) => (current === point.id ? next(view, point) : current))
                        }
                      />
                    ))}
                  </ol>
                )}
                <Section title="Loads out">
                  <div className="sheet pad grid gap-3">
                    {view.loads.length === 0 ? (
                      <p className="text-muted">None on this day.</p>
                    ) : (
                      <ul className="lines list-none">
                        {view.loads.map((load) => (
                          <li key={load.id} className="flex gap-3">
                            <span className="font-medium">{load.ticket}</span>
                            <span>{load.hauler}</span>
                            <span className="ml-auto">
                              {Number(
                                load.officialVolume === 'received'
                                  ? load.receivedVolumeM3
                                  : load.nominalVolumeM3,
                              )}{' '}
                              m³ {load.officialVolume}
                            </span>
                          </li>
                        ))}
                      </ul>
                    )}
                    {can('create:reading') &&
                      view.loadPlaces.to.length > 0 &&
                      (isLoading ? (
                        <>
                          <LoadOut round={view} onDone={() => setIsLoading(false)} />
                          <p>
                            <button
                              type="button"
                              className="link min-h-12"
                              onClick={() => setIsLoading(false)}
                            >
                              Leave without a load
                            </button>
                          </p>
                        </>
                      ) : (
                        <p>
                          <button type="button" className="btn btn-second" onClick={() => setIsLoading(true)}>
                            Add a load
                          </button>
                        </p>
                      ))}
                  </div>
                </Section>
                <Handover round={view} />
              </>
            }
            right={
              <details className="sheet pad" open>
                <summary className="font-semibold cursor-pointer min-h-6">Before you go out</summary>
                <ul className="list-disc pl-5 mt-2 grid gap-2">
                  {cautions.map((caution) => (
                    <li key={caution}>{caution}</li>
                  ))}
                </ul>
              </details>
            }
          />
        )}
      </Viewed>
    </>
  );
}
