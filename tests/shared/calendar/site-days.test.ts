import { describe, expect, it } from 'vitest';
import { dayName, isDay } from '#shared/calendar/day.ts';
import { addMonths, isMonth, monthRange, quarterMonths, quarterOf } from '#shared/calendar/month.ts';
import { createSiteDays, isTimeZone } from '#shared/calendar/site-days.ts';

const hours = (days: ReturnType<typeof createSiteDays>, day: string, next: string) =>
  (days.startMs(next) - days.startMs(day)) / 3_600_000;

describe('site days', () => {
  const london = createSiteDays([
    { validFromOn: '2020-01-01', timeZone: 'Europe/London', dayBoundary: '00:00' },
  ]);

  it('a day has 23 hours in spring and 25 in autumn (EU change on 29 March and 25 October 2026)', () => {
    expect(hours(london, '2026-03-29', '2026-03-30')).toBe(23);
    expect(hours(london, '2026-10-25', '2026-10-26')).toBe(25);
    expect(hours(london, '2026-06-01', '2026-06-02')).toBe(24);
  });

  it('an hour that does not exist begins at the first instant after it', () => {
    expect(london.readLocal('2026-03-29T01:30')).toEqual({
      kind: 'missing-hour',
      firstInstantAfter: '2026-03-29T01:00:00Z',
    });
    const halfPastOne = createSiteDays([
      { validFromOn: '2020-01-01', timeZone: 'Europe/London', dayBoundary: '01:30' },
    ]);
    expect(new Date(halfPastOne.startMs('2026-03-29')).toISOString()).toBe('2026-03-29T01:00:00.000Z');
  });

  it('a changed boundary takes effect from its date only', () => {
    const changed = createSiteDays([
      { validFromOn: '2020-01-01', timeZone: 'Europe/London', dayBoundary: '00:00' },
      { validFromOn: '2026-06-01', timeZone: 'Europe/London', dayBoundary: '08:00' },
    ]);
    expect(changed.dayOf(Date.parse('2026-05-31T02:00:00Z'))).toBe('2026-05-31');
    expect(changed.dayOf(Date.parse('2026-06-15T02:00:00Z'))).toBe('2026-06-14');
  });

  it('knows a time zone from a word', () => {
    expect([isTimeZone('America/Chicago'), isTimeZone('Somewhere/Else')]).toEqual([true, false]);
  });
});

describe('months and days as text', () => {
  it('steps over years and names quarters', () => {
    expect(addMonths('2026-01', -1)).toBe('2025-12');
    expect(monthRange('2025-11', '2026-02')).toEqual(['2025-11', '2025-12', '2026-01', '2026-02']);
    expect([quarterOf('2026-03'), quarterMonths('2026-Q1')]).toEqual([
      '2026-Q1',
      ['2026-01', '2026-02', '2026-03'],
    ]);
    expect(dayName('2026-03-04')).toBe('4 March 2026');
  });

  it.each(['2026-02-30', '31-02', '2026-13-01', '26-01-01', ''])('%j is no day', (text) =>
    expect(isDay(text)).toBe(false),
  );
  it.each(['2026-00', '2026-13', '2026-1', ''])('%j is no month', (text) =>
    expect(isMonth(text)).toBe(false),
  );
});
