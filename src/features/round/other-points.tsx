import { useId, useState } from 'react';
import type { RoundPointView, RoundView } from '#shared/views/round-view.ts';
import { formatLocal } from '../../lib/format-quantity.ts';
import { CounterField, ReadAt, SaveLine } from './point-parts.tsx';
import { useSave } from './use-save.ts';

interface PointProps {
  point: RoundPointView;
  round: RoundView;
  isToday: boolean;
  onDone: () => void;
}

const whenOf = (at: string | null) =>
  at === null ? { observedAt: new Date().toISOString() } : { observedLocal: at };

/** Level of a store as the gauge shows it. A doubtful way of writing is shown back and takes a second tap. */
export function LevelPoint({ point, round, isToday, onDone }: PointProps) {
  const [text, setText] = useState('');
  const [at, setAt] = useState<string | null>(isToday ? null : `${round.day}T07:30`);
  const [isAsked, setIsAsked] = useState(false);
  const { state, save, refuse } = useSave('/levels', `${point.name}: ${text} m`);
  const send = async () => {
    if (!/\d/.test(text)) return refuse('Enter the level in metres, like 1.12.');
    const saved = await save({
      storeId: point.subjectId,
      levelText: text,
      isConfirmed: isAsked,
      ...whenOf(at),
    });
    if (!saved) return setIsAsked(true);
    setText('');
    // A warning of the server stays on the screen until the reader goes on.
    if (saved === 'kept' || !saved.warning) onDone();
  };
  return (
    <form
      className="grid gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        void send();
      }}
    >
      <CounterField
        label="Level on the gauge, in metres"
        unit="m"
        value={text}
        onChange={(value) => {
          setText(value);
          setIsAsked(false);
        }}
        isWrong={state.kind === 'problem'}
      />
      <p className="hint">
        {point.last ? `Last ${Number(point.last.value)} m on ${formatLocal(point.last.at)}. ` : ''}
        {point.operatingLevelM
          ? `Highest operating level ${point.operatingLevelM} m, crest ${point.crestLevelM} m.`
          : ''}
      </p>
      <ReadAt nowLocal={round.nowLocal} value={at} onChange={setAt} />
      <SaveLine state={state} />
      <button type="submit" className="btn btn-big" disabled={state.kind === 'saving'}>
        Save the level
      </button>
    </form>
  );
}

/** Rain of the 24 hours before the reading; a trace is its own value. */
export function RainPoint({ point, round, isToday, onDone }: PointProps) {
  const [text, setText] = useState('');
  const [kind, setKind] = useState<'measured' | 'trace' | 'accumulated' | 'snow-water'>('measured');
  const [days, setDays] = useState('2');
  const [isAsked, setIsAsked] = useState(false);
  const [at, setAt] = useState<string | null>(isToday ? null : `${round.day}T07:30`);
  const { state, save, refuse } = useSave('/rain-days', `${point.name}: ${text} mm`);
  const daysId = useId();
  const kinds = [
    ['measured', 'One day'],
    ['trace', 'Trace'],
    ['accumulated', 'Several days'],
    ['snow-water', 'Melted snow'],
  ] as const;
  const send = async () => {
    if (kind !== 'trace' && !/\d/.test(text)) return refuse('Enter the rain in millimetres, like 5.2.');
    const saved = await save({
      stationId: point.subjectId,
      kind,
      depthText: kind === 'trace' ? '0' : text,
      unit: 'mm',
      isConfirmed: isAsked,
      ...(kind === 'accumulated' ? { accumulatedDays: Number(days) } : {}),
      ...whenOf(at),
    });
    if (!saved) return setIsAsked(true);
    setText('');
    if (saved === 'kept' || !saved.warning) onDone();
  };
  return (
    <form
      className="grid gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        void send();
      }}
    >
      <div className="grid grid-cols-2 gap-2" role="group" aria-label="What was read">
        {kinds.map(([value, label]) => (
          <button
            key={value}
            type="button"
            className="choice"
            aria-pressed={kind === value}
            onClick={() => {
              setKind(value);
              setIsAsked(false);
            }}
          >
            {label}
          </button>
        ))}
      </div>
      {kind !== 'trace' && (
        <CounterField
          label={kind === 'snow-water' ? 'Water of the melted snow, in millimetres' : 'Rain, in millimetres'}
          unit="mm"
          value={text}
          onChange={(value) => {
            setText(value);
            setIsAsked(false);
          }}
          isWrong={state.kind === 'problem'}
        />
      )}
      {kind === 'accumulated' && (
        <div>
          <label className="label" htmlFor={daysId}>
            Days since the gauge was last emptied
          </label>
          <input
            id={daysId}
            className="input"
            inputMode="numeric"
            value={days}
            onChange={(event) => setDays(event.target.value)}
          />
        </div>
      )}
      <p className="hint">
        {kind === 'accumulated'
          ? 'Counts for the days since the gauge was last emptied, marked as one amount.'
          : 'Counts for the 24 hours before the reading.'}{' '}
        A depth of snow is not rain: melt it first.
      </p>
      <ReadAt nowLocal={round.nowLocal} value={at} onChange={setAt} />
      <SaveLine state={state} />
      <button type="submit" className="btn btn-big" disabled={state.kind === 'saving'}>
        Save the rain
      </button>
    </form>
  );
}

/** A truck load out with its ticket. */
export function LoadOut({ round, onDone }: { round: RoundView; onDone: () => void }) {
  const [ticket, setTicket] = useState('');
  const [hauler, setHauler] = useState(round.loads[0]?.hauler ?? '');
  const [volume, setVolume] = useState('');
  const [from, setFrom] = useState(round.loadPlaces.from[0]?.id ?? '');
  const [to, setTo] = useState(round.loadPlaces.to[0]?.id ?? '');
  const [isAsked, setIsAsked] = useState(false);
  const [at, setAt] = useState<string | null>(round.day === round.today ? null : `${round.day}T07:30`);
  const { state, save } = useSave('/loads-out', `Load ${ticket}`);
  const ids = { ticket: useId(), hauler: useId(), from: useId(), to: useId() };
  const send = async () => {
    const saved = await save({
      ticket,
      hauler,
      nominalVolumeM3: volume,
      fromPlaceId: from,
      toPlaceId: to,
      officialVolume: 'nominal',
      isConfirmed: isAsked,
      ...whenOf(at),
    });
    if (saved) onDone();
    else setIsAsked(true);
  };
  return (
    <form
      className="grid gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        void send();
      }}
    >
      <div>
        <label className="label" htmlFor={ids.ticket}>
          Ticket number
        </label>
        <input
          id={ids.ticket}
          className="input"
          value={ticket}
          onChange={(event) => setTicket(event.target.value)}
          autoComplete="off"
        />
      </div>
      <div>
        <label className="label" htmlFor={ids.hauler}>
          Hauler
        </label>
        <input
          id={ids.hauler}
          className="input"
          value={hauler}
          onChange={(event) => setHauler(event.target.value)}
        />
      </div>
      <CounterField
        label="Nominal volume of the truck, in cubic metres"
        unit="m³"
        value={volume}
        onChange={setVolume}
        isWrong={false}
      />
      <ReadAt nowLocal={round.nowLocal} value={at} onChange={setAt} />
      <div className="grid gap-3 sm:grid-cols-2">
        <div>
          <label className="label" htmlFor={ids.from}>
            From
          </label>
          <select
            id={ids.from}
            className="input"
            value={from}
            onChange={(event) => setFrom(event.target.value)}
          >
            {round.loadPlaces.from.map((place) => (
              <option key={place.id} value={place.id}>
                {place.name}
              </option>
            ))}
          </select>
        </div>
        <div>
          <label className="label" htmlFor={ids.to}>
            To
          </label>
          <select id={ids.to} className="input" value={to} onChange={(event) => setTo(event.target.value)}>
            {round.loadPlaces.to.map((place) => (
              <option key={place.id} value={place.id}>
                {place.name}
              </option>
            ))}
          </select>
        </div>
      </div>
      <SaveLine state={state} />
      <button type="submit" className="btn btn-big" disabled={state.kind === 'saving'}>
        Save the load
      </button>
    </form>
  );
}
