import { Temporal } from '@js-temporal/polyfill';
import { addDays, type Day } from './day.ts';

/** Time zone and boundary time of a site, valid from a day. */
export interface SiteDayRule {
  validFromOn: Day;
  /** IANA name. */
  timeZone: string;
  /** 'HH:MM' on the wall clock. */
  dayBoundary: string;
}

export type LocalTimeReading =
  | { kind: 'ok'; observedAt: string; offsetMinutes: number }
  | { kind: 'missing-hour'; firstInstantAfter: string }
  | { kind: 'repeated-hour'; earlier: string; later: string };

/** Site days of a site: where each begins, and to which an instant belongs (method section 12). */
export interface SiteDays {
  /** Epoch milliseconds of the first instant of a site day. */
  startMs(day: Day): number;
  dayOf(instantMs: number): Day;
  offsetMinutes(instantMs: number): number;
  /** What a wall-clock time 'YYYY-MM-DDTHH:MM' means, including hours that do not exist or come twice. */
  readLocal(localTime: string): LocalTimeReading;
  /** 'YYYY-MM-DDTHH:MM' on the site's wall clock. */
  localTime(instantMs: number): string;
}

/**
 * Builds the site days from dated rules; starts are computed once each.
 * A boundary in an hour that does not exist begins at the first instant after it.
 * @throws RangeError when there is no rule
 */
export function createSiteDays(rules: readonly SiteDayRule[]): SiteDays {
  const sorted = [...rules].sort((a, b) => (a.validFromOn < b.validFromOn ? -1 : 1));
  if (!sorted.length) throw new RangeError('A site needs a time zone and a day boundary.');
  const starts = new Map<Day, number>();
  const ruleOn = (day: Day) => sorted.findLast((rule) => rule.validFromOn <= day) ?? sorted[0]!;

  const zoned = (localTime: string, timeZone: string, disambiguation: 'compatible' | 'earlier' | 'later') =>
    Temporal.PlainDateTime.from(localTime).toZonedDateTime(timeZone, { disambiguation });

  const startMs = (day: Day): number => {
    const known = starts.get(day);
    if (known !== undefined) return known;
    const rule = ruleOn(day);
    const wanted = zoned(`${day}T${rule.dayBoundary}`, rule.timeZone, 'earlier');
    const isMissing =
      zoned(`${day}T${rule.dayBoundary}`, rule.timeZone, 'later').toPlainTime().toString().slice(0, 5) !==
      rule.dayBoundary;
    const start = isMissing ? firstInstantAfterGap(day, rule) : wanted.epochMilliseconds;
    starts.set(day, start);
    return start;
  };

  const dayOf = (instantMs: number): Day => {
    const guess = localTimeIn(instantMs, sorted.at(-1)!.timeZone).slice(0, 10);
    let day = addDays(guess, 1);
    while (startMs(day) > instantMs) day = addDays(day, -1);
    return day;
  };

  const zoneAt = (instantMs: number) => ruleOn(dayOf(instantMs)).timeZone;
  return {
    startMs,
    dayOf,
    offsetMinutes: (instantMs) => offsetIn(instantMs, zoneAt(instantMs)),
    localTime: (instantMs) => localTimeIn(instantMs, zoneAt(instantMs)),
    readLocal(localTime) {
      const { timeZone } = ruleOn(localTime.slice(0, 10));
      const earlier = zoned(localTime, timeZone, 'earlier');
      const later = zoned(localTime, timeZone, 'later');
      if (earlier.epochMilliseconds === later.epochMilliseconds) {
        return {
          kind: 'ok',
          observedAt: earlier.toInstant().toString(),
          offsetMinutes: earlier.offsetNanoseconds / 6e10,
        };
      }
      const isMissing = later.toPlainDateTime().toString().slice(0, 16) !== localTime.slice(0, 16);
      return isMissing
        ? {
            kind: 'missing-hour',
            firstInstantAfter: (earlier.getTimeZoneTransition('next') ?? later).toInstant().toString(),
          }
        : {
            kind: 'repeated-hour',
            earlier: earlier.toInstant().toString(),
            later: later.toInstant().toString(),
          };
    },
  };
}

const inZone = (instantMs: number, timeZone: string) =>
  Temporal.Instant.fromEpochMilliseconds(instantMs).toZonedDateTimeISO(timeZone);
const localTimeIn = (instantMs: number, timeZone: string) =>
  inZone(instantMs, timeZone).toPlainDateTime().toString().slice(0, 16);
const offsetIn = (instantMs: number, timeZone: string) =>
  inZone(instantMs, timeZone).offsetNanoseconds / 6e10;

/** First instant after an hour that the clock skips: the moment of the change itself. */
function firstInstantAfterGap(day: Day, rule: SiteDayRule): number {
  const before = Temporal.PlainDateTime.from(`${day}T${rule.dayBoundary}`).toZonedDateTime(rule.timeZone, {
    disambiguation: 'earlier',
  });
  return (before.getTimeZoneTransition('next') ?? before).epochMilliseconds;
}

/** True for an IANA time-zone name the platform knows. */
export function isTimeZone(name: string): boolean {
  try {
    Temporal.Instant.fromEpochMilliseconds(0).toZonedDateTimeISO(name);
    return /^[A-Za-z]/.test(name);
  } catch {
    return false;
  }
}
