import fc from 'fast-check';
import { Decimal } from 'decimal.js';
import { describe, expect, it } from 'vitest';
import { splitInterval } from '#shared/ledger/day-volumes.ts';
import { planPosting } from '#shared/ledger/post-days.ts';
import { daysOf, reading, siteDaysFrom } from '../../factories/meter-facts.ts';

const hourMs = 3_600_000;
const start = Date.parse('2026-03-20T00:00:00Z');
const zones = ['Europe/London', 'America/Chicago', 'Australia/Lord_Howe', 'Asia/Kathmandu', 'UTC'];
const boundaries = ['00:00', '01:30', '02:00', '08:00', '23:30'];

describe('day volumes', () => {
  it('parts of an interval always add exactly to it, in any zone, over any clock change', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...zones),
        fc.constantFrom(...boundaries),
        fc.integer({ min: 0, max: 300 * 24 }),
        fc.integer({ min: 1, max: 240 * 60 }),
        fc.integer({ min: 0, max: 9_999_999 }),
        (zone, boundary, offsetHours, minutes, milli) => {
          const fromMs = start + offsetHours * hourMs;
          const volumeM3 = new Decimal(milli).div(1000);
          const parts = splitInterval(
            { fromMs, toMs: fromMs + minutes * 60_000, volumeM3 },
            siteDaysFrom(boundary, zone),
          );
          expect(parts.reduce((sum, part) => sum.plus(part.volumeM3), new Decimal(0)).eq(volumeM3)).toBe(
            true,
          );
          expect(parts.reduce((sum, part) => sum + part.toMs - part.fromMs, 0)).toBe(minutes * 60_000);
        },
      ),
    );
  });

  it('readings in any order give the same days', () => {
    const readings = Array.from({ length: 12 }, (_, index) =>
      reading(String(index), start + index * 20 * hourMs, String(1000 + index * 37)),
    );
    const siteDays = siteDaysFrom();
    const wanted = daysOf({ readings }, siteDays).days;
    fc.assert(
      fc.property(fc.shuffledSubarray(readings, { minLength: 12, maxLength: 12 }), (shuffled) => {
        expect(daysOf({ readings: shuffled }, siteDays).days).toEqual(wanted);
      }),
    );
  });

  it('the total between two readings does not depend on readings in between', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 200 }), { minLength: 2, maxLength: 15 }), (steps) => {
        let value = 0;
        const readings = [
          reading('first', start, '0'),
          ...steps.map((step, index) =>
            reading(String(index), start + (index + 1) * 17 * hourMs, String((value += step))),
          ),
        ];
        const total = (story: typeof readings) =>
          daysOf({ readings: story }, siteDaysFrom())
            .days.reduce((sum, day) => sum.plus(day.volumeM3), new Decimal(0))
            .toFixed();
        expect(total(readings)).toBe(total([readings[0]!, readings.at(-1)!]));
      }),
    );
  });

  it('what is posted replaces only the days that differ, and never in a closed month', () => {
    const day = (siteDay: string, volume: string) => ({
      siteDay,
      basis: 'measured' as const,
      volumeM3: new Decimal(volume),
      factIds: [],
    });
    const live = [
      { id: 'one', siteDay: '2026-03-30', basis: 'measured', volumeM3: '10.000000' },
      { id: 'two', siteDay: '2026-03-31', basis: 'measured', volumeM3: '11' },
      { id: 'three', siteDay: '2026-04-01', basis: 'measured', volumeM3: '12' },
    ];
    const plan = planPosting(
      [day('2026-03-30', '10'), day('2026-03-31', '9'), day('2026-04-01', '13')],
      live,
      new Set(['2026-03']),
    );
    expect(plan.pendingMonths).toEqual(['2026-03']);
    expect(plan.reversals.map((one) => one.id)).toEqual(['three']);
    expect(plan.postings.map((one) => one.siteDay)).toEqual(['2026-04-01']);
  });
});
