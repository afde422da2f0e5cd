import { useId, useState, type ReactNode } from 'react';
import { notReadReasonNames, notReadReasons } from '#shared/schemas/readings.ts';
import type { SaveState } from './use-save.ts';
import { useSave } from './use-save.ts';

/** Where an entry is, in three words, and what the server asked. */
export function SaveLine({ state }: { state: SaveState }) {
  return (
    <div role="status" aria-live="polite">
      {state.kind === 'saved-here' && (
        <p className="font-semibold text-warn">▣ Saved on this phone. It is sent when there is a signal.</p>
      )}
      {state.kind === 'sent' && <p className="font-semibold text-done">✓ Sent {state.at}</p>}
      {state.kind === 'sent' && state.answer.warning && (
        <p className="box box-warn mt-2">{state.answer.warning}</p>
      )}
      {state.kind === 'problem' && <p className="error-text">⚠ {state.text}</p>}
    </div>
  );
}

interface CounterProps {
  label: ReactNode;
  unit: string;
  value: string;
  onChange: (value: string) => void;
  isWrong: boolean;
}

/** Large number entry with the unit beside it; nothing is cleared, nothing is corrected while typing. */
export function CounterField({ label, unit, value, onChange, isWrong }: CounterProps) {
  const id = useId();
  return (
    <div>
      <label className="label" htmlFor={id}>
        {label}
      </label>
      <span className="flex items-center gap-3">
        <input
          id={id}
          className="input input-counter"
          inputMode="decimal"
          autoComplete="off"
          value={value}
          aria-invalid={isWrong}
          onChange={(event) => onChange(event.target.value)}
        />
        <span aria-hidden className="text-lg text-muted whitespace-nowrap">
          {unit}
        </span>
      </span>
    </div>
  );
}

/** When it was read: now, or a time on the site's clock. */
export function ReadAt({
  nowLocal,
  value,
  onChange,
}: {
  nowLocal: string;
  value: string | null;
  onChange: (value: string | null) => void;
}) {
  const id = useId();
  if (value === null) {
    return (
      <p className="hint">
        Read now.{' '}
        <button type="button" className="link min-h-12" onClick={() => onChange(nowLocal)}>
          Read at another time
        </button>
      </p>
    );
  }
  return (
    <div>
      <label className="label" htmlFor={id}>
        Day and time on the site’s clock
      </label>
      <input
        id={id}
        className="input"
        value={value.replace('T', ' ')}
        onChange={(event) => onChange(event.target.value.trim().replace(' ', 'T'))}
        aria-describedby={`${id}-hint`}
      />
      <p className="hint" id={`${id}-hint`}>
        Year-month-day and hour:minute, like 2026-03-04 07:50.{' '}
        <button type="button" className="link min-h-12" onClick={() => onChange(null)}>
          Now
        </button>
      </p>
    </div>
  );
}

/** "Not read" is an answer: a reason, no number, never a zero. */
export function NotRead({
  pointId,
  day,
  name,
  onDone,
}: {
  pointId: string;
  day: string;
  name: string;
  onDone: () => void;
}) {
  const [reason, setReason] = useState<string>('');
  const [note, setNote] = useState('');
  const { state, save } = useSave('/not-read', `${name}: not read`);
  const noteId = useId();
  const handleSave = async () => {
    const answer = await save({
      roundPointId: pointId,
      siteDay: day,
      reasonCode: reason || undefined,
      ...(note ? { note } : {}),
    });
    if (answer) onDone();
  };
  return (
    <fieldset className="grid gap-3">
      <legend className="font-medium mb-2">Why was it not read?</legend>
      <div className="grid grid-cols-2 gap-2">
        {notReadReasons.map((one) => (
          <button
            key={one}
            type="button"
            className="choice"
            aria-pressed={reason === one}
            onClick={() => setReason(one)}
          >
            {notReadReasonNames[one]}
          </button>
        ))}
      </div>
      <div>
        <label className="label" htmlFor={noteId}>
          Note <span className="text-muted font-normal">(optional)</span>
        </label>
        <input id={noteId} className="input" value={note} onChange={(event) => setNote(event.target.value)} />
      </div>
      <SaveLine state={state} />
      <button type="button" className="btn btn-big" onClick={() => void handleSave()}>
        Save “not read”
      </button>
      <p className="hint">No number is needed. The day shows “not read”, never zero.</p>
    </fieldset>
  );
}
