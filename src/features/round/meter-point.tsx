import { useState } from 'react';
import { checkReading, type ReadingCheck } from '#shared/ledger/check-reading.ts';
import { parseNumber } from '#shared/ledger/parse-number.ts';
import { volumeUnitsM3 } from '#shared/units/unit-factors.ts';
import type { RoundPointView, RoundView } from '#shared/views/round-view.ts';
import { formatLocal, formatNumber } from '../../lib/format-quantity.ts';
import { CounterField, ReadAt, SaveLine } from './point-parts.tsx';
import { useSave } from './use-save.ts';

/** The check the server will make, made while typing; null while there is nothing to check. */
function liveCheck(point: RoundPointView, text: string): ReadingCheck | null {
  const parsed = parseNumber(text, { decimals: point.register!.decimals });
  if (parsed.kind !== 'number' || !point.last) return null;
  return checkReading({
    spec: point.register!,
    rateM3PerDayMax: point.rateM3PerDayMax!,
    last: { registerValue: point.last.value, observedAtMs: Date.parse(point.last.observedAt) },
    next: { registerValue: parsed.value, observedAtMs: Date.now() },
    usualM3PerDay: point.usual ? (point.usual.lowM3 + point.usual.highM3) / 2 : null,
  });
}

const hours = (value: number) => `${value.toFixed(1)} h`;

function CheckLine({ point, check }: { point: RoundPointView; check: ReadingCheck }) {
  const usual = point.usual
    ? ` Usual day: ${formatNumber(point.usual.lowM3, 0)} to ${formatNumber(point.usual.highM3, 0)} m³.`
    : '';
  if (check.kind === 'plain' || check.kind === 'rollover') {
    return (
      <p>
        <span className="font-semibold">{formatNumber(Number(check.volumeM3), 1)} m³</span> in{' '}
        {hours(check.hours)}
        {check.kind === 'rollover' ? ', if the register went past its last digit' : ''}.{usual}
      </p>
    );
  }
  if (check.kind === 'too-fast')
    return (
      <p className="text-warn font-medium">
        {formatNumber(Number(check.volumeM3), 0)} m³ in {hours(check.hours)} is more than this pump can move (
        {formatNumber(point.rateM3PerDayMax!, 0)} m³/d).{usual}
      </p>
    );
  if (check.kind === 'went-down')
    return (
      <p className="text-warn font-medium">
        This is {formatNumber(Number(check.shortfall), 0)} m³ less than the last reading.
      </p>
    );
  return null;
}

interface Question {
  check: ReadingCheck;
  heldId: string;
  text: string;
}

/** Asked under the point, after the value is safe: it stays out of the totals until answered, and blocks nothing. */
function OddValue({
  point,
  question,
  onAnswer,
  onRetype,
}: {
  point: RoundPointView;
  question: Question;
  onAnswer: (answer: 'rollover' | 'confirmed', reason: string) => void;
  onRetype: () => void;
}) {
  const { check } = question;
  const hint =
    (check.kind === 'went-down' || check.kind === 'too-fast') && check.transposed ? check.transposed : null;
  return (
    <div className="box box-warn grid gap-3" role="group" aria-label={`A question about ${point.name}`}>
      <p className="font-semibold text-lg">
        {check.kind === 'too-fast'
          ? 'This is more than the pump can move. What happened?'
          : check.kind === 'rollover'
            ? 'The register went down. Did it pass its last digit?'
            : 'This is less than last time. What happened?'}
      </p>
      <p>
        Saved as you typed it. It stays out of the totals until this is answered.
        {hint && ` ${hint} would fit: two digits exchanged?`}
      </p>
      <button type="button" className="choice" onClick={onRetype}>
        I read it wrong: type it again
      </button>
      {check.kind === 'rollover' && (
        <button
          type="button"
          className="choice"
          onClick={() => onAnswer('rollover', 'The register passed its last digit')}
        >
          The register went past its last digit: {formatNumber(Number(check.volumeM3), 1)} m³
        </button>
      )}
      {check.kind === 'too-fast' && (
        <button
          type="button"
          className="choice"
          onClick={() => onAnswer('confirmed', 'Read twice, it really shows this')}
        >
          It really shows this, I read it twice
        </button>
      )}
      {check.kind !== 'too-fast' && (
        <p className="hint">
          Was the meter exchanged or reset? Leave this open and tell the supervisor, who records it with both
          readings.
        </p>
      )}
    </div>
  );
}

/** Reading of one register: last value, expected day, unit and digits stand there before typing. */
export function MeterPoint({
  point,
  round,
  isToday,
  onDone,
}: {
  point: RoundPointView;
  round: RoundView;
  isToday: boolean;
  onDone: () => void;
}) {
  const register = point.register!;
  const [text, setText] = useState('');
  const [at, setAt] = useState<string | null>(isToday ? null : `${round.day}T07:30`);
  const [question, setQuestion] = useState<Question | null>(null);
  const { state, save, reset } = useSave('/readings', `${point.name}: ${text}`);
  const check = at === null ? liveCheck(point, text) : null;
  const when = at === null ? { observedAt: new Date().toISOString() } : { observedLocal: at };
  const send = async (answer: 'none' | 'rollover' | 'confirmed', extra: Record<string, unknown> = {}) => {
    const saved = await save({ meterId: point.subjectId, registerText: text, answer, ...when, ...extra });
    if (!saved) return;
    if (saved.state === 'held' && saved.check) setQuestion({ check: saved.check, heldId: saved.id, text });
    else onDone();
  };
  if (question) {
    return (
      <OddValue
        point={point}
        question={question}
        onAnswer={(answer, reason) => void send(answer, { supersedesId: question.heldId, reason })}
        onRetype={() => {
          setQuestion(null);
          reset();
          setText('');
        }}
      />
    );
  }
  const unit = volumeUnitsM3[register.unit];
  const multiplier = Number(register.multiplier);
  return (
    <form
      className="grid gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        void send(
          'none',
          point.done.some((one) => one.state === 'held')
            ? { supersedesId: point.done.find((one) => one.state === 'held')!.id, reason: 'Read again' }
            : {},
        );
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
        unit={multiplier === 1 ? unit.label : `× ${multiplier} ${unit.label}`}
        value={text}
        onChange={setText}
        isWrong={state.kind === 'problem'}
      />
      <div aria-live="polite" className="min-h-6">
        {check && <CheckLine point={point} check={check} />}
        {!check && point.last && (
          <p className="hint">
            Last {point.last.text} {volumeUnitsM3[point.register!.unit].label} on {formatLocal(point.last.at)}
            .
            {point.usual &&
              ` Usual day: ${formatNumber(point.usual.lowM3, 0)} to ${formatNumber(point.usual.highM3, 0)} m³.`}
          </p>
        )}
      </div>
      <ReadAt nowLocal={round.nowLocal} value={at} onChange={setAt} />
      <SaveLine state={state} />
      <button type="submit" className="btn btn-big" disabled={state.kind === 'saving'}>
        Save {point.code}
      </button>
    </form>
  );
}
