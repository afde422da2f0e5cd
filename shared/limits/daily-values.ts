import { Decimal } from 'decimal.js';
import type { Day } from '../calendar/day.ts';

export type BelowDetectionRule = 'zero' | 'half' | 'full' | 'carried';

/** A counted result in the unit of the limit; value is the limit of detection when it is below. */
export interface LimitResult {
  id: string;
  siteDay: Day;
  comparator: '=' | '<' | '>' | '~';
  value: string;
}

/** Number that stands for a result below detection under a rule. */
export function substitute(
  result: Pick<LimitResult, 'comparator' | 'value'>,
  rule: BelowDetectionRule,
): Decimal {
  const value = new Decimal(result.value);
  if (result.comparator !== '<') return value;
  return rule === 'zero' ? new Decimal(0) : rule === 'half' ? value.div(2) : value;
}

export interface DailyValue {
  siteDay: Day;
  value: Decimal;
  /** True when a result of the day was below detection. */
  isBelow: boolean;
  /** Largest detection limit among the day's results below detection. */
  detectionLimit: Decimal | null;
  resultIds: string[];
}

/**
 * Several results on one day first become one daily value: their mean.
 * @source 40 CFR 122.2; method section 11
 */
export function dailyValues(results: readonly LimitResult[], rule: BelowDetectionRule): DailyValue[] {
  const byDay = new Map<Day, LimitResult[]>();
  for (const result of results) byDay.set(result.siteDay, [...(byDay.get(result.siteDay) ?? []), result]);
  return [...byDay]
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([siteDay, ofDay]) => {
      const below = ofDay.filter((one) => one.comparator === '<').map((one) => new Decimal(one.value));
      return {
        siteDay,
        value: ofDay.reduce((sum, one) => sum.plus(substitute(one, rule)), new Decimal(0)).div(ofDay.length),
        isBelow: below.length > 0,
        detectionLimit: below.length ? Decimal.max(...below) : null,
        resultIds: ofDay.map((one) => one.id),
      };
    });
}
