import { Decimal } from 'decimal.js';
import { volumeUnitsM3, type VolumeUnit } from '../units/unit-factors.ts';

/** What a register shows and how it becomes a volume. */
export interface RegisterSpec {
  digits: number;
  decimals: number;
  unit: VolumeUnit;
  /** Exact decimal text. */
  multiplier: string;
}

/** Value at which the register goes back to zero, in the units it shows: 7 digits with 1 decimal give 1 000 000. */
export const registerModulus = (spec: RegisterSpec): Decimal =>
  new Decimal(10).pow(spec.digits - spec.decimals);

/**
 * Volume between two values of one register, m³: (closing − opening + wrap) × multiplier × unit factor.
 * @returns exact decimal; negative when the register went down and no wrap is given
 * @source method section 12
 */
export function registerVolumeM3(
  opening: Decimal.Value,
  closing: Decimal.Value,
  wrap: Decimal.Value,
  spec: RegisterSpec,
): Decimal {
  return new Decimal(closing)
    .minus(opening)
    .plus(wrap)
    .times(spec.multiplier)
    .times(volumeUnitsM3[spec.unit].factor);
}
