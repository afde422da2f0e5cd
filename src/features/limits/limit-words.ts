import type { LimitRowView } from '#shared/views/lab-view.ts';

export const statisticNames = {
  'daily-maximum': 'daily maximum',
  'daily-minimum': 'daily minimum',
  'monthly-average': 'monthly average',
  range: 'range',
} as const;

/** A limit as a reader says it, with its unit. */
export function limitWords(
  limit: Pick<LimitRowView, 'statistic' | 'valueText' | 'lowText' | 'highText' | 'unit'>,
): string {
  const unit = limit.unit === 'pH' ? '' : ` ${limit.unit}`;
  if (limit.statistic === 'range') return `${limit.lowText} to ${limit.highText}${unit}`;
  return `${limit.statistic === 'daily-minimum' ? 'at least' : 'at most'} ${limit.valueText}${unit}`;
}
