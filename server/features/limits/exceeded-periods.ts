import { dayName } from '#shared/calendar/day.ts';
import { monthName } from '#shared/calendar/month.ts';
import type { JudgedLimit } from './verdict-service.ts';

/** One period of a limit that was exceeded: a day, or the month for an average. */
export function exceededPeriods({
  limit,
  month,
  verdict,
  analyteName,
  pointCode,
}: JudgedLimit): { periodKey: string; sentence: string }[] {
  if (verdict.word !== 'exceed') return [];
  const limitText = limit.statistic === 'range' ? `${limit.lowText} to ${limit.highText}` : limit.valueText;
  if (limit.statistic === 'monthly-average') {
    return [
      {
        periodKey: month,
        sentence: `${analyteName} at ${pointCode}: average ${verdict.valueText} ${limit.unit} in ${monthName(month)}; limit ${limitText} ${limit.unit}, monthly average.`,
      },
    ];
  }
  return verdict.days
    .filter((day) => day.exceeds)
    .map((day) => ({
      periodKey: day.siteDay,
      sentence: `${analyteName} at ${pointCode}: ${day.valueText} ${limit.unit} on ${dayName(day.siteDay)}; limit ${limitText} ${limit.unit}, ${limit.statistic.replace('-', ' ')}.`,
    }));
}

/** Limit and period of everything that exceeds as the record stands now. */
export const standingKeys = (judged: readonly JudgedLimit[]): Set<string> =>
  new Set(
    judged.flatMap((one) => exceededPeriods(one).map(({ periodKey }) => `${one.limit.id} ${periodKey}`)),
  );
