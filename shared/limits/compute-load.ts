import { Decimal } from 'decimal.js';
import { permitLoadFactor } from '../units/unit-factors.ts';

/**
 * Load of a day in kg/d: m³/d × mg/L ÷ 1000.
 * @source unit definition; method section 11
 */
export const loadKgPerDay = (flowM3PerDay: Decimal.Value, concentrationMgPerL: Decimal.Value): Decimal =>
  new Decimal(flowM3PerDay).times(concentrationMgPerL).div(1000);

/** US gallons of a million in m³. */
const m3PerMillionGallons = '3785.411784';

/**
 * Load of a day in lb/d: MGD × mg/L × the permit's factor.
 * @param factor the permits' 8.34, or the exact 8.345404
 * @source 40 CFR permits' usual factor; loads-cases L01
 */
export const loadLbPerDay = (
  flowMgd: Decimal.Value,
  concentrationMgPerL: Decimal.Value,
  factor: Decimal.Value = permitLoadFactor,
): Decimal => new Decimal(flowMgd).times(concentrationMgPerL).times(factor);

export const m3PerDayToMgd = (flowM3PerDay: Decimal.Value): Decimal =>
  new Decimal(flowM3PerDay).div(m3PerMillionGallons);
