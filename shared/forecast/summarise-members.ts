import { quantileSorted } from 'simple-statistics';
import type { Members } from './draw-members.ts';

/** 10th, 50th and 90th percentile over the members. */
export interface Spread {
  low: number;
  middle: number;
  high: number;
}

export interface ForecastMonth {
  leachateM3: Spread;
  levelM: Spread;
  loads: Spread;
  /** Share of the members in which the operating level is passed all the same. */
  overShare: number;
}

export interface ForecastSummary {
  memberCount: number;
  months: ForecastMonth[];
  /** Over the whole span; a year of lows is rarer than one low month, so these are no sums of the months. */
  total: { leachateM3: Spread; loads: Spread; spillM3: Spread };
  /** Share of the members in which something runs over the crest. */
  spillShare: number;
  haulShare: number;
  overShare: number;
}

function spreadOf(values: number[]): Spread {
  const sorted = values.sort((a, b) => a - b);
  const at = (share: number) => quantileSorted(sorted, share);
  return { low: at(0.1), middle: at(0.5), high: at(0.9) };
}

/** Puts the members of all workers, in order, into percentiles by month. */
export function summariseMembers(parts: readonly Members[], monthCount: number): ForecastSummary {
  const joined = (name: keyof Members) => parts.flatMap((part) => Array.from(part[name]));
  const [leachate, level, loads, over, spill] = [
    joined('leachateM3'),
    joined('levelM'),
    joined('loads'),
    joined('isOver'),
    joined('spillM3'),
  ];
  const memberCount = leachate.length / monthCount;
  const column = (values: readonly number[], month: number) =>
    Array.from({ length: memberCount }, (_, member) => values[member * monthCount + month]!);
  const totals = (values: readonly number[]) =>
    Array.from({ length: memberCount }, (_, member) =>
      values.slice(member * monthCount, (member + 1) * monthCount).reduce((sum, one) => sum + one, 0),
    );
  const share = (values: readonly number[]) => values.filter((one) => one > 0).length / memberCount;
  return {
    memberCount,
    months: Array.from({ length: monthCount }, (_, month) => ({
      leachateM3: spreadOf(column(leachate, month)),
      levelM: spreadOf(column(level, month)),
      loads: spreadOf(column(loads, month)),
      overShare: share(column(over, month)),
    })),
    total: {
      leachateM3: spreadOf(totals(leachate)),
      loads: spreadOf(totals(loads)),
      spillM3: spreadOf(totals(spill)),
    },
    spillShare: share(totals(spill)),
    haulShare: share(totals(loads)),
    overShare: share(totals(over)),
  };
}
