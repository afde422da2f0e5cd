import { dayName, type Day } from '#shared/calendar/day.ts';
import { fieldProblem } from '#shared/problems.ts';
import type { Transaction } from '../../db/transaction.ts';
import { siteDaysOf } from '../sites/site-service.ts';

export interface Observed {
  observedAt: string;
  observedOffsetMinutes: number;
  siteDay: Day;
  observedAtMs: number;
}

interface ObservedInput {
  observedAt?: string | undefined;
  observedLocal?: string | undefined;
  repeatedHour?: 'earlier' | 'later' | undefined;
}

const clockSkewMs = 5 * 60_000;

/**
 * The instant, offset and site day of something seen.
 * @throws Problem for a time to come, an hour the clock skipped, or an hour it showed twice without saying which
 */
export async function resolveObservedAt(
  tx: Transaction,
  siteId: string,
  now: Date,
  input: ObservedInput,
): Promise<Observed> {
  const days = await siteDaysOf(tx, siteId);
  let observedAtMs = input.observedAt ? Date.parse(input.observedAt) : now.getTime();
  if (input.observedLocal) {
    const read = days.readLocal(input.observedLocal);
    if (read.kind === 'missing-hour') {
      throw fieldProblem(
        '/observedLocal',
        `The clock skipped ${input.observedLocal.slice(11)} on ${dayName(input.observedLocal.slice(0, 10))}. Enter the time the clock showed, before or after the change.`,
      );
    }
    if (read.kind === 'repeated-hour' && !input.repeatedHour) {
      throw fieldProblem(
        '/repeatedHour',
        `The clock showed ${input.observedLocal.slice(11)} twice on ${dayName(input.observedLocal.slice(0, 10))}. Say whether it was the first or the second time.`,
      );
    }
    observedAtMs = Date.parse(read.kind === 'ok' ? read.observedAt : read[input.repeatedHour ?? 'earlier']);
  }
  if (observedAtMs > now.getTime() + clockSkewMs) {
    throw fieldProblem('/observedLocal', 'This time is still to come. Enter the time the reading was taken.');
  }
  return {
    observedAt: new Date(observedAtMs).toISOString(),
    observedAtMs,
    observedOffsetMinutes: days.offsetMinutes(observedAtMs),
    siteDay: days.dayOf(observedAtMs),
  };
}
