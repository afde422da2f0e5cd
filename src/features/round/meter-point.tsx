import { useId, useState } from 'react';
import { volumeUnitsM3 } from '#shared/units/unit-factors.ts';
import type { PointDone, RoundPointView, RoundView } from '#shared/views/round-view.ts';
import { usePlace } from '../../app/place.ts';
import { formatLocal, formatNumber } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';
import { CheckLine, checkOf, registerProblem, unitOf } from './meter-check.tsx';
import { OddValue } from './odd-value.tsx';
import { CounterField, ReadAt, SaveLine } from './point-parts.tsx';
import { useSave } from './use-save.ts';

interface MeterProps {
  point: RoundPointView;
  round: RoundView;
  isToday: boolean;
  onDone: () => void;
}

/** Entry of one register; a correction keeps the time of what it replaces, and says why. */
function RegisterForm({
  point,
  round,
  isToday,
  replaces,
  onDone,
  onWarning,
}: MeterProps & { replaces: PointDone | null; onWarning: (warning: string) => void }) {
  const register = point.register!;
  const [text, setText] = useState('');
  const [typedAtMs, setTypedAtMs] = useState(() => Date.now());
  const [reason, setReason] = useState(replaces?.state === 'held' ? 'Read wrong, typed again' : '');
  const [at, setAt] = useState<string | null>(replaces ? replaces.at : isToday ? null : `${round.day}T07:30`);
  const { state, save, refuse } = useSave('/readings', `${point.name}: ${text} ${unitOf(point)}`);
  const reasonId = useId();
  const isSameTime = replaces !== null && at === replaces.at;
  const check = checkOf(
    point,
    text,
    isSameTime ? Date.parse(replaces.observedAt) : at === null ? typedAtMs : Date.parse(`${at}:00Z`),
  );
  const send = async () => {
    const problem = registerProblem(point, text);
    if (problem) return refuse(problem);
    if (replaces && reason.trim() === '') return refuse('Say why the reading is replaced.');
    const when = isSameTime
      ? { observedAt: replaces.observedAt }
      : at === null
        ? { observedAt: new Date().toISOString() }
        : { observedLocal: at };
    const saved = await save({
      meterId: point.subjectId,
      registerText: text,
      answer: 'none',
      ...when,
      ...(replaces ? { supersedesId: replaces.id, reason } : {}),
    });
    if (!saved) return;
    setText('');
    if (saved !== 'kept' && saved.warning) onWarning(saved.warning);
    else if (saved === 'kept' || saved.state === 'stored') onDone();
  };
  const unit = volumeUnitsM3[register.unit];
  const multiplier = Number(register.multiplier);
  return (
    <form
      className="grid gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        void send();
      }}
    >
      <CounterField
        label={
          <>
            Register, in {unit.words}
            {multiplier !== 1 && <strong> × {multiplier}</strong>}{' '}
            <span className="hint font-normal">
              {register.digits} digits,{' '}
              {register.decimals === 0 ? 'no decimals' : `${register.decimals} decimals`}
            </span>
          </>
        }
        unit={unitOf(point)}
        value={text}
        onChange={(value) => {
          setText(value);
          setTypedAtMs(Date.now());
        }}
        isWrong={state.kind === 'problem'}
      />
      <div aria-live="polite" className="min-h-6">
        {check && <CheckLine point={point} check={check} />}
        {!check && point.last && (
          <p className="hint">
            Last {point.last.text} {unitOf(point)} on {formatLocal(point.last.at)}.
            {point.usual &&
              ` Usual day: ${formatNumber(point.usual.lowM3, 0)} to ${formatNumber(point.usual.highM3, 0)} m³.`}
          </p>
        )}
      </div>
      <ReadAt nowLocal={round.nowLocal} value={at} onChange={setAt} />
      {replaces && (
        <div>
          <label className="label" htmlFor={reasonId}>
            Why {replaces.text} is replaced
          </label>
          <input
            id={reasonId}
            className="input"
            value={reason}
            onChange={(event) => setReason(event.target.value)}
          />
        </div>
      )}
      <SaveLine state={state} />
      <button type="submit" className="btn btn-big" disabled={state.kind === 'saving'}>
        Save {point.code}
      </button>
    </form>
  );
}

/** Two readings of one time: who may settle it says which counts, and why. */
function Dispute({ point }: { point: RoundPointView }) {
  const { site, can } = usePlace();
  const [chosenId, setChosenId] = useState('');
  const [reason, setReason] = useState('');
  const settle = useWrite<{ id: string; chosenReadingId: string; reason: string }>(site.id, '/disputes');
  const reasonId = useId();
  const rivals = point.done.filter((one) => one.state === 'dispute');
  return (
    <div className="box box-warn grid gap-3" role="group" aria-label={`Two readings of ${point.name} differ`}>
      <p className="font-semibold text-lg">Two readings of one time differ. Which one counts?</p>
      <p>Both are kept. The interval stays out of the totals until one is chosen.</p>
      {rivals.map((one) => (
        <button
          key={one.id}
          type="button"
          className="choice"
          aria-pressed={chosenId === one.id}
          disabled={!can('settle:reading')}
          onClick={() => setChosenId(one.id)}
        >
          {one.text} {unitOf(point)}, {formatLocal(one.at)}, {one.by}
        </button>
      ))}
      {can('settle:reading') ? (
        <>
          <div>
            <label className="label" htmlFor={reasonId}>
              Reason
            </label>
            <input
              id={reasonId}
              className="input"
              value={reason}
              onChange={(event) => setReason(event.target.value)}
            />
          </div>
          {settle.error && <p className="error-text">⚠ {settle.error.document.detail}</p>}
          <button
            type="button"
            className="btn"
            disabled={!chosenId}
            onClick={() => settle.mutate({ id: newId(), chosenReadingId: chosenId, reason })}
          >
            This one counts
          </button>
        </>
      ) : (
        <p className="hint">The supervisor chooses. Tell them what you saw.</p>
      )}
    </div>
  );
}

/** One register on the round: to be read, read, in question, or in dispute. */
export function MeterPoint(props: MeterProps) {
  const { point, onDone } = props;
  const [form, setForm] = useState<{ replaces: PointDone | null } | null>(null);
  const [warning, setWarning] = useState<string | null>(null);
  const { state, save } = useSave('/readings', `${point.name}: your answer`);
  const held = point.done.find((one) => one.state === 'held');
  const last = point.done.at(-1);
  if (form || !last) {
    return (
      <>
        <RegisterForm
          key={form?.replaces?.id ?? 'first'}
          {...props}
          replaces={form?.replaces ?? null}
          onDone={() => {
            setForm(null);
            onDone();
          }}
          onWarning={(text) => {
            setForm(null);
            setWarning(text);
          }}
        />
        {form && (
          <p>
            <button type="button" className="link min-h-12" onClick={() => setForm(null)}>
              Leave it as it is
            </button>
          </p>
        )}
      </>
    );
  }
  if (held) {
    const answer = async (kind: 'rollover' | 'confirmed', reason: string) => {
      const saved = await save({
        meterId: point.subjectId,
        registerText: held.text,
        answer: kind,
        observedAt: held.observedAt,
        supersedesId: held.id,
        reason,
      });
      if (saved) onDone();
    };
    return (
      <>
        <OddValue
          point={point}
          held={held}
          check={checkOf(point, held.text, Date.parse(held.observedAt))}
          onAnswer={(kind, reason) => void answer(kind, reason)}
          onRetype={() => setForm({ replaces: held })}
        />
        <SaveLine state={state} />
      </>
    );
  }
  if (point.done.some((one) => one.state === 'dispute')) return <Dispute point={point} />;
  return (
    <div className="grid gap-3">
      {warning && (
        <p className="box box-warn" role="status">
          {warning}
        </p>
      )}
      <ul className="lines list-none">
        {point.done.map((one) => (
          <li key={one.id} className="flex flex-wrap gap-x-4 items-baseline">
            <span>
              <span className="font-medium">
                {one.text} {unitOf(point)}
              </span>{' '}
              at {formatLocal(one.at)}, {one.by}
            </span>
            <button
              type="button"
              className="link min-h-12 ml-auto"
              onClick={() => setForm({ replaces: one })}
            >
              Correct this reading
            </button>
          </li>
        ))}
      </ul>
      <p>
        <button type="button" className="btn btn-second" onClick={() => setForm({ replaces: null })}>
          Add another reading of the day
        </button>
      </p>
    </div>
  );
}
