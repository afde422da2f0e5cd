import { Decimal } from 'decimal.js';
import type { Day } from '../calendar/day.ts';
import { loadKgPerDay, loadLbPerDay, m3PerDayToMgd } from './compute-load.ts';
import { dailyValues, type BelowDetectionRule, type DailyValue, type LimitResult } from './daily-values.ts';

export const verdictWords = [
  'pass',
  'exceed',
  'incomplete',
  'cannot be judged',
  'no discharge',
  'not required',
] as const;
export type VerdictWord = (typeof verdictWords)[number];

export interface LimitTerms {
  statistic: 'daily-maximum' | 'daily-minimum' | 'monthly-average' | 'range';
  quantity: 'concentration' | 'load';
  /** Limit as the permit prints it; a range has low and high. */
  valueText: string | null;
  lowText: string | null;
  highText: string | null;
  unit: string;
  isInclusive: boolean;
  samplesMin: number;
  belowDetectionRule: BelowDetectionRule;
  roundingMode: 'half-up' | 'half-even';
  decimals: number;
}

export interface LimitFacts {
  results: readonly LimitResult[];
  /** Measured flow of a day at the point, m³; a day without one is absent. */
  flowM3ByDay: ReadonlyMap<Day, string>;
  /** True when every day of the period has a measured flow of zero. */
  isNoDischarge: boolean;
  heldCount: number;
}

export interface JudgedDay {
  siteDay: Day;
  valueText: string;
  isBelow: boolean;
  exceeds: boolean;
  /** Why the day cannot be judged, or null. */
  unjudged: string | null;
  flowM3: string | null;
  resultIds: string[];
  /** Share of the limit, for the eye only. */
  share: number | null;
}

export interface Verdict {
  word: VerdictWord;
  /** The deciding value, rounded once to the limit's digits. */
  valueText: string | null;
  exceededDays: Day[];
  days: JudgedDay[];
  sampleCount: number;
  /** The comparison in words, with what was put in for values below detection. */
  sentence: string;
  /** Says when another rule for values below detection would change the word. */
  note: string | null;
  share: number | null;
}

const rounded = (value: Decimal, terms: LimitTerms) =>
  value.toDecimalPlaces(
    terms.decimals,
    terms.roundingMode === 'half-even' ? Decimal.ROUND_HALF_EVEN : Decimal.ROUND_HALF_UP,
  );
const text = (value: Decimal, terms: LimitTerms) => rounded(value, terms).toFixed(terms.decimals);

/** Whether a rounded value lies outside the limit; equal to a maximum complies. */
const isOutside = (value: Decimal, terms: LimitTerms): boolean => liesOutside(rounded(value, terms), terms);

function liesOutside(v: Decimal, terms: LimitTerms): boolean {
  const over = (limit: string) => (terms.isInclusive ? v.gt(limit) : v.gte(limit));
  const under = (limit: string) => (terms.isInclusive ? v.lt(limit) : v.lte(limit));
  if (terms.statistic === 'range') return under(terms.lowText!) || over(terms.highText!);
  return terms.statistic === 'daily-minimum' ? under(terms.valueText!) : over(terms.valueText!);
}

/** Says what was rounded, where the rounding decides. */
const beforeRounding = (value: Decimal, terms: LimitTerms): string =>
  liesOutside(value, terms) === isOutside(value, terms)
    ? ''
    : ` (${value.toSignificantDigits(6).toFixed()}, rounded once to the limit’s digits)`;

function shareOf(value: Decimal, terms: LimitTerms): number | null {
  const limit = terms.statistic === 'range' ? terms.highText : terms.valueText;
  return limit && !new Decimal(limit).isZero() ? rounded(value, terms).div(limit).toNumber() : null;
}

const loadOf = (flowM3: string, concentration: Decimal, unit: string): Decimal =>
  unit === 'lb/d' ? loadLbPerDay(m3PerDayToMgd(flowM3), concentration) : loadKgPerDay(flowM3, concentration);

interface DayAmount {
  daily: DailyValue;
  flowM3: string | null;
  /** Null when a load has no flow of the same day. */
  amount: Decimal | null;
  /** Detection limit as an amount in the limit's unit. */
  limitAmount: Decimal | null;
}

function amountsOf(terms: LimitTerms, facts: LimitFacts, rule: BelowDetectionRule): DayAmount[] {
  return dailyValues(facts.results, rule).map((daily) => {
    if (terms.quantity === 'concentration')
      return { daily, flowM3: null, amount: daily.value, limitAmount: daily.detectionLimit };
    const flowM3 = facts.flowM3ByDay.get(daily.siteDay) ?? null;
    return {
      daily,
      flowM3,
      amount: flowM3 === null ? null : loadOf(flowM3, daily.value, terms.unit),
      limitAmount:
        flowM3 === null || !daily.detectionLimit ? null : loadOf(flowM3, daily.detectionLimit, terms.unit),
    };
  });
}

/** A result below a detection limit that lies above the limit itself cannot be judged. */
const isBlind = (one: DayAmount, terms: LimitTerms) =>
  terms.statistic !== 'daily-minimum' &&
  one.limitAmount !== null &&
  terms.valueText !== null &&
  one.limitAmount.gt(terms.valueText);

function judgeDays(amounts: readonly DayAmount[], terms: LimitTerms): JudgedDay[] {
  return amounts.map((one) => {
    const { daily, amount, flowM3 } = one;
    const blind = isBlind(one, terms) && daily.isBelow;
    const unjudged =
      amount === null
        ? 'no flow measured that day'
        : blind
          ? `detection limit ${one.limitAmount!.toFixed()} is above the limit`
          : null;
    const carries = daily.isBelow && terms.belowDetectionRule === 'carried' ? '<' : '';
    return {
      siteDay: daily.siteDay,
      valueText: amount === null ? '' : carries + text(amount, terms),
      isBelow: daily.isBelow,
      exceeds: amount !== null && !blind && isOutside(amount, terms),
      unjudged,
      flowM3,
      resultIds: daily.resultIds,
      share:
        amount === null
          ? null
          : shareOf(
              daily.isBelow && terms.quantity === 'concentration' ? daily.detectionLimit! : amount,
              terms,
            ),
    };
  });
}

const meanOf = (values: readonly Decimal[]) =>
  values.reduce((sum, value) => sum.plus(value), new Decimal(0)).div(values.length);

function wordOf(
  terms: LimitTerms,
  facts: LimitFacts,
  rule: BelowDetectionRule,
): { word: VerdictWord; value: Decimal | null; days: JudgedDay[] } {
  const amounts = amountsOf(terms, facts, rule);
  const days = judgeDays(amounts, terms);
  const judged = amounts.flatMap((one) => (one.amount === null ? [] : [one.amount]));
  if (!days.length) {
    return {
      word:
        facts.heldCount > 0
          ? 'cannot be judged'
          : facts.isNoDischarge
            ? 'no discharge'
            : terms.samplesMin === 0
              ? 'not required'
              : 'incomplete',
      value: null,
      days,
    };
  }
  const isAverage = terms.statistic === 'monthly-average';
  const usable = amounts.filter((one) => one.amount !== null);
  const blindCount = usable.filter((one) => one.daily.isBelow && isBlind(one, terms)).length;
  const value = !judged.length
    ? null
    : isAverage
      ? meanOf(judged)
      : terms.statistic === 'daily-minimum'
        ? Decimal.min(...judged)
        : Decimal.max(...judged);
  const exceeds = isAverage
    ? value !== null &&
      isOutside(
        blindCount
          ? meanOf(amountsOf(terms, facts, 'zero').flatMap((one) => (one.amount ? [one.amount] : [])))
          : value,
        terms,
      )
    : days.some((day) => day.exceeds);
  if (exceeds) return { word: 'exceed', value, days };
  if (days.some((day) => day.unjudged) || facts.heldCount > 0)
    return { word: 'cannot be judged', value, days };
  return { word: days.length < terms.samplesMin ? 'incomplete' : 'pass', value, days };
}

const ruleWords: Record<BelowDetectionRule, string> = {
  zero: 'zero',
  half: 'half of the detection limit',
  full: 'the full detection limit',
  carried: 'the full detection limit, “<” carried',
};

function sentenceOf(terms: LimitTerms, facts: LimitFacts, result: ReturnType<typeof wordOf>): string {
  const limit =
    terms.statistic === 'range'
      ? `${terms.lowText} to ${terms.highText}`
      : `${terms.statistic === 'daily-minimum' ? 'at least' : 'at most'} ${terms.valueText}`;
  const below = facts.results.filter((one) => one.comparator === '<').length;
  const put = below ? ` ${below} below detection, counted as ${ruleWords[terms.belowDetectionRule]}.` : '';
  if (result.word === 'no discharge')
    return 'Nothing was discharged: the flow was measured as zero on every day.';
  if (result.word === 'not required') return 'No sample was required and none was taken.';
  if (!result.days.length)
    return facts.heldCount
      ? `${facts.heldCount} results are held and not counted yet.`
      : `No sample yet; ${terms.samplesMin} required.`;
  const unjudged = result.days.filter((day) => day.unjudged);
  const why = unjudged.length
    ? ` ${unjudged.length} of ${result.days.length} days cannot be judged: ${unjudged[0]!.unjudged}.`
    : '';
  const count = result.word === 'incomplete' ? ` ${result.days.length} of ${terms.samplesMin} samples.` : '';
  const value =
    result.value === null
      ? ''
      : `${text(result.value, terms)} ${terms.unit}${beforeRounding(result.value, terms)} against ${limit} ${terms.unit}.`;
  return `${value}${count}${why}${put}`.trim();
}

/**
 * The verdict of one limit over one period, with its working. Exact decimals; rounded once, last, to the limit's digits.
 * Nothing passes for lack of data.
 * @source 40 CFR 122.2, 445.21; method section 11
 */
export function evaluateLimit(terms: LimitTerms, facts: LimitFacts): Verdict {
  const result = wordOf(terms, facts, terms.belowDetectionRule);
  const others = (['zero', 'half', 'full'] as const).filter(
    (rule) =>
      rule !== terms.belowDetectionRule && !(terms.belowDetectionRule === 'carried' && rule === 'full'),
  );
  const flips = facts.results.some((one) => one.comparator === '<')
    ? others
        .map((rule) => ({ rule, other: wordOf({ ...terms, belowDetectionRule: rule }, facts, rule) }))
        .filter(({ other }) => other.word !== result.word)
    : [];
  const flip = flips[0];
  return {
    word: result.word,
    valueText: result.value === null ? null : text(result.value, terms),
    exceededDays: result.days.filter((day) => day.exceeds).map((day) => day.siteDay),
    days: result.days,
    sampleCount: result.days.length,
    sentence: sentenceOf(terms, facts, result),
    note: flip
      ? `Counted as ${ruleWords[flip.rule]} it would be ${flip.other.value === null ? '' : `${text(flip.other.value, terms)} ${terms.unit}, `}${flip.other.word}.`
      : null,
    share: result.value === null ? null : shareOf(result.value, terms),
  };
}
