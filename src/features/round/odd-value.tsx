import type { ReadingCheck } from '#shared/ledger/check-reading.ts';
import type { PointDone, RoundPointView } from '#shared/views/round-view.ts';
import { usePlace } from '../../app/place.ts';
import { formatLocal, formatNumber } from '../../lib/format-quantity.ts';
import { unitOf } from './meter-check.tsx';

interface OddValueProps {
  point: RoundPointView;
  held: PointDone;
  check: ReadingCheck | null;
  onAnswer: (answer: 'rollover' | 'confirmed', reason: string) => void;
  onRetype: () => void;
}

/** Asked about a value that is safe already: it stays out of the totals until answered, and blocks nothing. */
export function OddValue({ point, held, check, onAnswer, onRetype }: OddValueProps) {
  const { can } = usePlace();
  const hint =
    check && (check.kind === 'went-down' || check.kind === 'too-fast') && check.transposed
      ? check.transposed
      : null;
  return (
    <div className="box box-warn grid gap-3" role="group" aria-label={`A question about ${point.name}`}>
      <p className="font-semibold text-lg">
        {check?.kind === 'too-fast'
          ? 'This is more than the pump can move. What happened?'
          : check?.kind === 'rollover'
            ? 'The register went down. Did it pass its last digit?'
            : 'This is less than last time. What happened?'}
      </p>
      <p>
        {held.text} {unitOf(point)} at {formatLocal(held.at)} is saved as it was typed. It stays out of the
        totals until this is answered.{hint && ` ${hint} would fit: two digits exchanged?`}
      </p>
      <button type="button" className="choice" onClick={onRetype}>
        It was read wrong: type it again
      </button>
      {check?.kind === 'rollover' && (
        <button
          type="button"
          className="choice"
          onClick={() => onAnswer('rollover', 'The register passed its last digit')}
        >
          The register went past its last digit: {formatNumber(Number(check.volumeM3), 1)} m³
        </button>
      )}
      {check?.kind === 'too-fast' && (
        <button
          type="button"
          className="choice"
          onClick={() => onAnswer('confirmed', 'Read twice, it really shows this')}
        >
          It really shows this, I read it twice
        </button>
      )}
      {check?.kind !== 'too-fast' && (
        <p className="hint">
          Was the meter exchanged or reset?{' '}
          {can('settle:reading')
            ? 'Record it under Site, meters, with both readings; the day is computed again.'
            : 'Leave this open and tell the supervisor, who records it with both readings.'}
        </p>
      )}
    </div>
  );
}
