import type { Decimal } from 'decimal.js';
import { registerModulus, registerVolumeM3, type RegisterSpec } from './register.ts';

export interface ReadingCheckInput {
  spec: RegisterSpec;
  rateM3PerDayMax: number;
  last: { registerValue: string; observedAtMs: number } | null;
  next: { registerValue: string; observedAtMs: number };
  /** Usual day of this meter, m³/d, or null when there is too little history. */
  usualM3PerDay: number | null;
}

/** What to show and ask while a register is being read. */
export type ReadingCheck =
  | { kind: 'first' }
  | { kind: 'plain'; volumeM3: string; hours: number; m3PerDay: number }
  | { kind: 'rollover'; volumeM3: string; hours: number; m3PerDay: number }
  | { kind: 'went-down'; impliedM3PerDay: number; shortfall: string; transposed: string | null }
  | { kind: 'too-fast'; volumeM3: string; hours: number; m3PerDay: number; transposed: string | null }
  | { kind: 'not-after'; hours: number };

/** A value with two neighbouring digits exchanged that would fit, or null. Only a hint, never applied. */
function transposedFit(value: string, fits: (candidate: string) => boolean): string | null {
  const digits = value.split('.')[0]!;
  for (let index = 0; index < digits.length - 1; index += 1) {
    const swapped = digits.slice(0, index) + digits[index + 1]! + digits[index]! + digits.slice(index + 2);
    if (swapped !== digits && fits(swapped)) return swapped;
  }
  return null;
}

/**
 * Looks at a reading against the last one, in the order of the trade's delta rules.
 * Unlikely is asked about, never blocked.
 * @source common practice, no source; order of rules as in the data dictionary's section on readings
 */
export function checkReading({
  spec,
  rateM3PerDayMax,
  last,
  next,
  usualM3PerDay,
}: ReadingCheckInput): ReadingCheck {
  if (!last) return { kind: 'first' };
  const hours = (next.observedAtMs - last.observedAtMs) / 3_600_000;
  if (hours <= 0) return { kind: 'not-after', hours };
  const perDay = (volume: Decimal) => volume.times(24).div(hours).toNumber();
  const fits = (candidate: string) => {
    const rate = perDay(registerVolumeM3(last.registerValue, candidate, 0, spec));
    const usual = usualM3PerDay ?? rateM3PerDayMax / 2;
    return rate >= 0 && Math.abs(rate - usual) <= Math.max(0.5 * usual, 0.1 * rateM3PerDayMax);
  };
  const volume = registerVolumeM3(last.registerValue, next.registerValue, 0, spec);
  if (volume.gte(0)) {
    const m3PerDay = perDay(volume);
    const plain = { volumeM3: volume.toDecimalPlaces(6).toFixed(), hours, m3PerDay };
    return m3PerDay <= rateM3PerDayMax
      ? { kind: 'plain', ...plain }
      : { kind: 'too-fast', ...plain, transposed: transposedFit(next.registerValue, fits) };
  }
  const rolled = registerVolumeM3(last.registerValue, next.registerValue, registerModulus(spec), spec);
  if (perDay(rolled) <= rateM3PerDayMax) {
    return {
      kind: 'rollover',
      volumeM3: rolled.toDecimalPlaces(6).toFixed(),
      hours,
      m3PerDay: perDay(rolled),
    };
  }
  return {
    kind: 'went-down',
    impliedM3PerDay: perDay(rolled),
    shortfall: volume.neg().toDecimalPlaces(6).toFixed(),
    transposed: transposedFit(next.registerValue, fits),
  };
}
