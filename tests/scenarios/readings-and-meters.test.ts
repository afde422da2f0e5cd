import { Decimal } from 'decimal.js';
import { describe, expect, it } from 'vitest';
import { alignEstimate } from '#shared/ledger/align-estimate.ts';
import { checkReading } from '#shared/ledger/check-reading.ts';
import { atMs, daysOf, reading, replacement, sevenDigits, siteDaysFrom } from '../factories/meter-facts.ts';

/** Arithmetic of each case by hand: the project's acceptance scenarios 1 to 8, invented numbers. */
const at8 = siteDaysFrom('08:00');
const midnight = siteDaysFrom('00:00');
const sum = (volumes: readonly Decimal[]) =>
  volumes.reduce((total, one) => total.plus(one), new Decimal(0)).toFixed();

describe('readings and meters', () => {
  it('1: a plain day gives 86 m³ in 24 h, 3.58 m³/h; leading zeros are optional', () => {
    const t = [atMs(at8, '2026-03-03T08:00'), atMs(at8, '2026-03-04T08:00')];
    const { days } = daysOf(
      { readings: [reading('a', t[0]!, '0184212'), reading('b', t[1]!, '184298')] },
      at8,
    );
    expect(days).toEqual([
      { siteDay: '2026-03-03', basis: 'measured', volumeM3: new Decimal(86), factIds: ['a', 'b'] },
    ]);
    const check = checkReading({
      spec: sevenDigits,
      rateM3PerDayMax: 400,
      last: { registerValue: '184212', observedAtMs: t[0]! },
      next: { registerValue: '184298', observedAtMs: t[1]! },
      usualM3PerDay: null,
    });
    expect(check).toMatchObject({ kind: 'plain', volumeM3: '86', hours: 24 });
    expect(check.kind === 'plain' && check.m3PerDay / 24).toBeCloseTo(3.58, 2);
  });

  it('2: 25.5 h and 102 m³ are 96.0 m³ a day; a midnight boundary splits 64.7 + 37.3 and adds to 102', () => {
    const t = [atMs(midnight, '2026-03-03T07:50'), atMs(midnight, '2026-03-04T09:20')];
    const check = checkReading({
      spec: sevenDigits,
      rateM3PerDayMax: 400,
      last: { registerValue: '100', observedAtMs: t[0]! },
      next: { registerValue: '202', observedAtMs: t[1]! },
      usualM3PerDay: null,
    });
    expect(check).toMatchObject({ kind: 'plain', hours: 25.5, m3PerDay: 96 });
    const { days } = daysOf({ readings: [reading('a', t[0]!, '100'), reading('b', t[1]!, '202')] }, midnight);
    expect(days.map((day) => day.volumeM3.toFixed(1))).toEqual(['64.7', '37.3']);
    expect(sum(days.map((day) => day.volumeM3))).toBe('102');
  });

  it('3: over a month edge 90 m³ are 60 in March and 30 in April at midnight, all of March at 08:00', () => {
    const story = (days: typeof at8) => ({
      readings: [
        reading('a', atMs(days, '2026-03-31T08:00'), '0'),
        reading('b', atMs(days, '2026-04-01T08:00'), '90'),
      ],
    });
    expect(
      daysOf(story(midnight), midnight).days.map((day) => [day.siteDay, day.volumeM3.toFixed()]),
    ).toEqual([
      ['2026-03-31', '60'],
      ['2026-04-01', '30'],
    ]);
    expect(daysOf(story(at8), at8).days.map((day) => [day.siteDay, day.volumeM3.toFixed()])).toEqual([
      ['2026-03-31', '90'],
    ]);
  });

  it('4: 100 m³ over the autumn change are 25 h, 92 over the spring change 23 h: 96.0 a day each', () => {
    const rate = (from: string, to: string, volume: string) => {
      const check = checkReading({
        spec: sevenDigits,
        rateM3PerDayMax: 400,
        last: { registerValue: '0', observedAtMs: atMs(at8, from) },
        next: { registerValue: volume, observedAtMs: atMs(at8, to) },
        usualM3PerDay: null,
      });
      return check.kind === 'plain' && [check.hours, check.m3PerDay];
    };
    expect(rate('2026-10-24T08:00', '2026-10-25T08:00', '100')).toEqual([25, 96]);
    expect(rate('2026-03-28T08:00', '2026-03-29T08:00', '92')).toEqual([23, 96]);
    const repeated = at8.readLocal('2026-10-25T01:30');
    expect(
      repeated.kind === 'repeated-hour' &&
        (Date.parse(repeated.later) - Date.parse(repeated.earlier)) / 3_600_000,
    ).toBe(1);
  });

  it('5: 999 950 to 41 proposes a rollover of 91 m³; 412 380 to 412 300 is a question with its hint', () => {
    const spec = { ...sevenDigits, digits: 6 };
    const hour = 3_600_000;
    const check = (last: string, next: string, usual: number | null = null) =>
      checkReading({
        spec,
        rateM3PerDayMax: 400,
        last: { registerValue: last, observedAtMs: 0 },
        next: { registerValue: next, observedAtMs: 24 * hour },
        usualM3PerDay: usual,
      });
    expect(check('999950', '41')).toMatchObject({ kind: 'rollover', volumeM3: '91' });
    expect(check('412380', '412300')).toMatchObject({
      kind: 'went-down',
      impliedM3PerDay: 999_920,
      shortfall: '80',
    });
    expect(check('412380', '421460', 80)).toMatchObject({ kind: 'too-fast', transposed: '412460' });
    const { intervals, sentences } = daysOf(
      { spec, readings: [reading('a', 0, '412380'), reading('b', 24 * hour, '412300')] },
      at8,
    );
    expect(intervals[0]).toMatchObject({ volumeM3: null, heldBecause: 'register-went-down' });
    expect(sentences).toHaveLength(1);
  });

  it('6: a swap to US gal × 100 gives 40 + 66.24 = 106.24 m³; without the swap it is a question', () => {
    const readings = [
      reading('a', atMs(at8, '2026-03-04T08:00'), '318402'),
      reading('b', atMs(at8, '2026-03-05T08:00'), '187'),
    ];
    const spec = { ...sevenDigits, digits: 6 };
    const events = [
      replacement('out', atMs(at8, '2026-03-04T10:30'), { registerBefore: '318442', registerAfter: null }),
      replacement('in', atMs(at8, '2026-03-04T11:15'), {
        registerBefore: null,
        registerAfter: '12',
        unitAfter: 'gal-us',
        multiplierAfter: '100',
      }),
    ];
    const { intervals, days } = daysOf({ spec, readings, events }, at8);
    const volumes = intervals
      .filter((one) => one.volumeM3 !== null && !one.volumeM3.isZero())
      .map((one) => one.volumeM3!.toFixed(2));
    expect(volumes).toEqual(['40.00', '66.24']);
    expect(sum(days.map((day) => day.volumeM3)).slice(0, 6)).toBe('106.24');
    expect(daysOf({ spec, readings }, at8).intervals[0]!.heldBecause).toBe('register-went-down');
  });

  it('7: an estimate takes the place of a stuck register; the raw readings stay', () => {
    const t = [atMs(at8, '2026-03-04T08:00'), atMs(at8, '2026-03-05T08:00')];
    const estimate = {
      id: 'estimate',
      kind: 'estimate' as const,
      fromMs: t[0]!,
      toMs: t[1]!,
      volumeM3: new Decimal('6.4').times('15.12').toFixed(),
      divisor: null,
    };
    const { days } = daysOf(
      { readings: [reading('a', t[0]!, '185730'), reading('b', t[1]!, '185730')], adjustments: [estimate] },
      at8,
    );
    expect(days).toHaveLength(1);
    expect(days[0]).toMatchObject({ siteDay: '2026-03-04', basis: 'estimated' });
    expect(days[0]!.volumeM3.toFixed(1)).toBe('96.8');
    expect(days[0]!.factIds).toEqual(expect.arrayContaining(['estimate', 'a', 'b']));
  });

  it('8: Friday to Monday 273 m³ are three apportioned days of 91', () => {
    const { days } = daysOf(
      {
        readings: [
          reading('a', atMs(at8, '2026-03-06T08:00'), '1000'),
          reading('b', atMs(at8, '2026-03-09T08:00'), '1273'),
        ],
      },
      at8,
    );
    expect(days.map((day) => [day.siteDay, day.basis, day.volumeM3.toFixed()])).toEqual([
      ['2026-03-06', 'apportioned', '91'],
      ['2026-03-07', 'apportioned', '91'],
      ['2026-03-08', 'apportioned', '91'],
    ]);
  });

  it('9: a calibration of +6.0 % divides 8 480 by 1.06 to 8 000; the raw values stay', () => {
    const t = [atMs(at8, '2026-01-14T08:00'), atMs(at8, '2026-04-14T08:00')];
    const layer = {
      id: 'layer',
      kind: 'calibration' as const,
      fromMs: t[0]!,
      toMs: t[1]!,
      volumeM3: null,
      divisor: '1.06',
    };
    const { intervals } = daysOf(
      { readings: [reading('a', t[0]!, '0'), reading('b', t[1]!, '8480')], adjustments: [layer] },
      at8,
    );
    expect(sum(intervals.map((one) => one.volumeM3!.toDecimalPlaces(6)))).toBe('8000');
    expect(intervals[0]).toMatchObject({ opening: '0', closing: '8480' });
  });

  it('10: two readings of one instant are a dispute, out of totals until one is chosen', () => {
    const t = [0, 24, 48].map((hours) => atMs(at8, '2026-03-04T08:00') + hours * 3_600_000);
    const readings = [
      reading('a', t[0]!, '55000'),
      reading('b', t[1]!, '55310'),
      reading('c', t[1]!, '55130'),
      reading('d', t[2]!, '55400'),
    ];
    expect(daysOf({ readings }, at8).intervals.map((one) => one.heldBecause)).toEqual(['dispute', 'dispute']);
    expect(daysOf({ readings, chosen: ['c'] }, at8).intervals.map((one) => one.volumeM3!.toFixed())).toEqual([
      '130',
      '270',
    ]);
  });

  it('an estimate goes from reading to reading and never counts a stretch twice', () => {
    const h = 3_600_000;
    const intervals = [
      { fromMs: 0, toMs: 24 * h },
      { fromMs: 24 * h, toMs: 48 * h },
    ];
    expect(alignEstimate(intervals, { fromMs: 1 * h, toMs: 25 * h }, 3 * h)).toEqual({
      kind: 'aligned',
      fromMs: 0,
      toMs: 24 * h,
    });
    expect(alignEstimate(intervals, { fromMs: 12 * h, toMs: 48 * h }, 3 * h)).toEqual({
      kind: 'cuts',
      end: 'from',
      beforeMs: 0,
      afterMs: 24 * h,
    });
    const estimate = {
      id: 'e',
      kind: 'estimate' as const,
      fromMs: 12 * h,
      toMs: 24 * h,
      volumeM3: '5',
      divisor: null,
    };
    const { intervals: cut } = daysOf(
      { readings: [reading('a', 0, '0'), reading('b', 48 * h, '80')], adjustments: [estimate] },
      at8,
    );
    expect(cut.map((one) => [one.fromMs / h, one.toMs / h, one.volumeM3!.toFixed()])).toEqual([
      [0, 12, '20'],
      [12, 24, '5'],
      [24, 48, '40'],
    ]);
  });
});
