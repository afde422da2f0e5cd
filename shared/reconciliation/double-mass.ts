import { daysBetween, firstDay, type Day } from '../calendar/day.ts';
import type { Month } from '../calendar/month.ts';

export interface MassPair {
  month: Month;
  predictedM3: number;
  measuredM3: number;
}

export interface DatedEvent {
  onDay: Day;
  kind: 'meter' | 'cover';
  sentence: string;
}

export interface MassBreak {
  /** First month after the break. */
  month: Month;
  slopeBefore: number;
  slopeAfter: number;
  /** Slope after over slope before. */
  ratio: number;
  /** How much better two slopes fit than one: F with 1 and n − 2 degrees of freedom. */
  fStatistic: number;
  /** Dated events near the break, nearest first, meters before covers on the same distance. */
  events: (DatedEvent & { daysAway: number })[];
}

const monthsMin = 3;
/** About the 5 % point for a break at an unknown place, one slope. Source: Andrews 1993, Table 1 (from memory). */
const fMin = 8.6;
/** @assumed our choice: a change of slope under 10 % is within what meters and model do by themselves */
const changeMin = 0.1;
const nearDays = 45;

const sum = (pairs: readonly MassPair[], pick: (pair: MassPair) => number) =>
  pairs.reduce((total, pair) => total + pick(pair), 0);

/** Pumped for each cubic metre predicted. */
const slopeOf = (pairs: readonly MassPair[]) =>
  sum(pairs, (pair) => pair.measuredM3) / sum(pairs, (pair) => pair.predictedM3);

const squaredError = (pairs: readonly MassPair[], slope: number) =>
  sum(pairs, (pair) => (pair.measuredM3 - slope * pair.predictedM3) ** 2);

/**
 * Looks for the month from which pumped follows predicted at another slope: the double-mass curve bends there.
 * @param pairs months in order that have both sides @param events what happened at the cell
 * @returns null where no bend stands out
 * @source Searcy & Hardison 1960, USGS WSP 1541-B (ratio of slopes); the F test of one slope against two is our choice
 */
export function findMassBreak(pairs: readonly MassPair[], events: readonly DatedEvent[]): MassBreak | null {
  const usable = pairs.filter((pair) => pair.predictedM3 > 0);
  let best: { index: number; error: number } | null = null;
  for (let index = monthsMin; index <= usable.length - monthsMin; index += 1) {
    const [before, after] = [usable.slice(0, index), usable.slice(index)];
    const error = squaredError(before, slopeOf(before)) + squaredError(after, slopeOf(after));
    if (!best || error < best.error) best = { index, error };
  }
  if (!best) return null;
  const [before, after] = [usable.slice(0, best.index), usable.slice(best.index)];
  const [slopeBefore, slopeAfter] = [slopeOf(before), slopeOf(after)];
  const one = squaredError(usable, slopeOf(usable));
  const fStatistic = best.error === 0 ? Infinity : ((one - best.error) * (usable.length - 2)) / best.error;
  const ratio = slopeAfter / slopeBefore;
  if (!(fStatistic >= fMin) || Math.abs(ratio - 1) < changeMin) return null;
  const { month } = after[0]!;
  const near = events
    .map((event) => ({ ...event, daysAway: Math.abs(daysBetween(firstDay(month), event.onDay)) }))
    .filter((event) => event.daysAway <= nearDays)
    .sort((a, b) => (a.kind === b.kind ? a.daysAway - b.daysAway : a.kind === 'meter' ? -1 : 1));
  return { month, slopeBefore, slopeAfter, ratio, fStatistic, events: near };
}

/** Where no dated event is near: what else makes a slope change. Source: trade practice, no source. */
export const causesWithoutEvent = [
  'storm water entering',
  'a neighbour cell on the same header',
  'condensate or wash water',
  'liquid returned',
] as const;
