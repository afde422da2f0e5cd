import { checkReading, type ReadingCheck } from '#shared/ledger/check-reading.ts';
import { parseNumber } from '#shared/ledger/parse-number.ts';
import { volumeUnitsM3 } from '#shared/units/unit-factors.ts';
import type { RoundPointView } from '#shared/views/round-view.ts';
import { formatNumber } from '../../lib/format-quantity.ts';

/** Unit of what a point shows, as it stands beside the number. */
export function unitOf(point: RoundPointView): string {
  if (point.kind === 'level') return 'm';
  if (!point.register) return '';
  const { unit, multiplier } = point.register;
  return `${Number(multiplier) === 1 ? '' : `× ${Number(multiplier)} `}${volumeUnitsM3[unit].label}`;
}

/** The check the server makes, made here while typing; null while there is nothing to check. */
export function checkOf(point: RoundPointView, text: string, observedAtMs: number): ReadingCheck | null {
  const parsed = parseNumber(text, { decimals: point.register!.decimals });
  if (parsed.kind !== 'number' || !point.last) return null;
  return checkReading({
    spec: point.register!,
    rateM3PerDayMax: point.rateM3PerDayMax!,
    last: { registerValue: point.last.value, observedAtMs: Date.parse(point.last.observedAt) },
    next: { registerValue: parsed.value, observedAtMs },
    usualM3PerDay: point.usual ? (point.usual.lowM3 + point.usual.highM3) / 2 : null,
  });
}

/** What is wrong with a typed register before it is kept: nothing bad waits on the phone. */
export function registerProblem(point: RoundPointView, text: string): string | null {
  if (text.trim() === '') return 'Enter what the register shows.';
  const parsed = parseNumber(text, { decimals: point.register!.decimals });
  if (parsed.kind === 'wrong') return parsed.reason;
  if (parsed.kind === 'number') return null;
  return point.register!.decimals === 0
    ? `${parsed.question} The register shows whole numbers: enter the digits without a point or comma.`
    : `${parsed.question} Enter it with a point before the decimals, like 1725.5.`;
}

const hours = (value: number) => `${value.toFixed(1)} h`;

export function CheckLine({ point, check }: { point: RoundPointView; check: ReadingCheck }) {
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
