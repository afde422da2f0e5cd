import type { Interval } from './intervals.ts';

export type AlignedSpan =
  | { kind: 'aligned'; fromMs: number; toMs: number }
  /** An end lies inside an interval, too far from the readings at its ends. */
  | { kind: 'cuts'; end: 'from' | 'to'; beforeMs: number; afterMs: number };

/**
 * Moves the ends of an estimate to the readings they stand for: an estimate replaces whole intervals.
 * An end outside every interval stays.
 * @param snapMs how far an end may be moved
 */
export function alignEstimate(
  intervals: readonly Pick<Interval, 'fromMs' | 'toMs'>[],
  span: { fromMs: number; toMs: number },
  snapMs: number,
): AlignedSpan {
  const ends = { from: span.fromMs, to: span.toMs };
  for (const end of ['from', 'to'] as const) {
    const cut = intervals.find((one) => one.fromMs < ends[end] && one.toMs > ends[end]);
    if (!cut) continue;
    const nearest = ends[end] - cut.fromMs <= cut.toMs - ends[end] ? cut.fromMs : cut.toMs;
    if (Math.abs(nearest - ends[end]) > snapMs)
      return { kind: 'cuts', end, beforeMs: cut.fromMs, afterMs: cut.toMs };
    ends[end] = nearest;
  }
  return { kind: 'aligned', fromMs: ends.from, toMs: ends.to };
}
