import { describe, expect, it } from 'vitest';
import loads from '#data/published/loads-cases.json' with { type: 'json' };
import limits445 from '#data/published/limits-40cfr445.json' with { type: 'json' };
import { Decimal } from 'decimal.js';
import { loadKgPerDay, loadLbPerDay } from '#shared/limits/compute-load.ts';
import { dailyValues, type BelowDetectionRule, type LimitResult } from '#shared/limits/daily-values.ts';
import { evaluateLimit, type LimitFacts, type LimitTerms } from '#shared/limits/evaluate-limit.ts';
import { exactLoadFactor, gpadInLPerHaDay } from '#shared/units/unit-factors.ts';

const terms = (change: Partial<LimitTerms>): LimitTerms => ({
  statistic: 'daily-maximum',
  quantity: 'concentration',
  valueText: '1',
  lowText: null,
  highText: null,
  unit: 'mg/L',
  isInclusive: true,
  samplesMin: 0,
  belowDetectionRule: 'half',
  roundingMode: 'half-up',
  decimals: 2,
  ...change,
});
const day = (index: number) => `2026-03-${String(index + 1).padStart(2, '0')}`;
/** Results of one a day from texts such as '<0.10'. */
const results = (texts: string[]): LimitResult[] =>
  texts.map((text, index) => ({
    id: String(index),
    siteDay: day(index),
    comparator: text.startsWith('<') ? '<' : '=',
    value: text.replace('<', ''),
  }));
const facts = (texts: string[], flows: string[] = [], change: Partial<LimitFacts> = {}): LimitFacts => ({
  results: results(texts),
  flowM3ByDay: new Map(flows.map((flow, index) => [day(index), flow])),
  isNoDischarge: false,
  heldCount: 0,
  ...change,
});

describe('24: non-detects, averages and loads (hand arithmetic of the acceptance scenario)', () => {
  const zinc = (rule: BelowDetectionRule) =>
    evaluateLimit(
      terms({
        statistic: 'monthly-average',
        valueText: '0.11',
        decimals: 3,
        samplesMin: 4,
        belowDetectionRule: rule,
      }),
      facts(['0.18', '<0.10', '<0.10', '0.12']),
    );

  it('zinc averages 0.075, 0.100 and 0.125 by zero, half and full; the note says where the verdict would change', () => {
    expect(zinc('zero')).toMatchObject({ word: 'pass', valueText: '0.075' });
    expect(zinc('half')).toMatchObject({ word: 'pass', valueText: '0.100' });
    expect(zinc('half').note).toContain('0.125');
    expect(zinc('full')).toMatchObject({ word: 'exceed', valueText: '0.125' });
  });

  it('three samples when four are required are incomplete, not a pass', () => {
    const verdict = evaluateLimit(
      terms({ statistic: 'monthly-average', valueText: '4.9', decimals: 1, samplesMin: 4 }),
      facts(['3.2', '<0.5', '4.4']),
    );
    expect(verdict.word).toBe('incomplete');
  });

  it('ammonia averages 3.49; the loads of the days average 0.417 kg/d, not 0.575', () => {
    const texts = ['3.2', '<0.5', '6.1', '4.4'];
    const average = evaluateLimit(
      terms({ statistic: 'monthly-average', valueText: '4.90', decimals: 2, samplesMin: 4 }),
      facts(texts),
    );
    expect(average).toMatchObject({ word: 'pass', valueText: '3.49' });
    const load = evaluateLimit(
      terms({
        statistic: 'monthly-average',
        quantity: 'load',
        valueText: '0.500',
        unit: 'kg/d',
        decimals: 3,
        samplesMin: 4,
      }),
      facts(texts, ['120', '300', '90', '150']),
    );
    expect(load.days.map((one) => one.valueText)).toEqual(['0.384', '0.075', '0.549', '0.660']);
    expect(load).toMatchObject({ word: 'pass', valueText: '0.417' });
  });

  it('a sample without a flow of its day cannot be judged', () => {
    const load = evaluateLimit(
      terms({ quantity: 'load', valueText: '0.9', unit: 'kg/d' }),
      facts(['3.2', '4.0'], ['120']),
    );
    expect(load.word).toBe('cannot be judged');
    expect(load.days[1]).toMatchObject({ unjudged: 'no flow measured that day', valueText: '' });
  });

  it('one pH of 9.2 exceeds 6.0 to 9.0 whatever the others are; 9.0 itself complies', () => {
    const range = terms({
      statistic: 'range',
      valueText: null,
      lowText: '6.0',
      highText: '9.0',
      unit: 'pH',
      decimals: 1,
    });
    expect(evaluateLimit(range, facts(['7.0', '9.2', '7.2']))).toMatchObject({
      word: 'exceed',
      exceededDays: [day(1)],
    });
    expect(evaluateLimit(range, facts(['6.0', '9.0'])).word).toBe('pass');
    expect(evaluateLimit({ ...range, isInclusive: false }, facts(['6.0', '7.0'])).word).toBe('exceed');
  });

  it('10.4 exceeds a daily maximum of 10; an equal value complies; a blind detection limit cannot be judged', () => {
    const ammonia = terms({ valueText: '10', decimals: 1 });
    expect(evaluateLimit(ammonia, facts(['10.4'])).word).toBe('exceed');
    expect(evaluateLimit(ammonia, facts(['10.0'])).word).toBe('pass');
    expect(evaluateLimit(terms({ valueText: '0.033', decimals: 3 }), facts(['<0.05'])).word).toBe(
      'cannot be judged',
    );
  });

  it('nothing passes for lack of data', () => {
    expect(evaluateLimit(terms({ samplesMin: 4 }), facts([])).word).toBe('incomplete');
    expect(evaluateLimit(terms({ samplesMin: 0 }), facts([])).word).toBe('not required');
    expect(evaluateLimit(terms({ samplesMin: 4 }), facts([], [], { isNoDischarge: true })).word).toBe(
      'no discharge',
    );
    expect(evaluateLimit(terms({ samplesMin: 1 }), facts(['0.5'], [], { heldCount: 2 })).word).toBe(
      'cannot be judged',
    );
  });
});

const published = (id: string) =>
  loads.find((one) => one.id === id)! as unknown as {
    inputs: Record<string, unknown>;
    expected: unknown;
    source: string;
  };

describe('published loads and averages (each source stands in data/published/loads-cases.json)', () => {
  const flows = published('L01').inputs['flow_mgd'] as string[];
  const concentrations = published('L01').inputs['conc_mg_l'] as string[];
  const daily = flows.map((flow, index) => loadLbPerDay(flow, concentrations[index]!));

  it('L01, L02: BOD5 loads of four days in lb/d with 8.34, and their mean 31.53 by half-up', () => {
    expect(daily.map((one) => one.toDecimalPlaces(2).toNumber())).toEqual(published('L01').expected);
    const mean = daily
      .map((one) => one.toDecimalPlaces(2))
      .reduce((sum, one) => sum.plus(one), new Decimal(0))
      .div(4);
    expect(mean.toDecimalPlaces(2, Decimal.ROUND_HALF_UP).toNumber()).toBe(published('L02').expected);
  });

  it('L05: mean flow times mean concentration would give another number', () => {
    const mean = (values: string[]) =>
      values.reduce((sum, one) => sum.plus(one), new Decimal(0)).div(values.length);
    expect(loadLbPerDay(mean(flows), mean(concentrations)).toDecimalPlaces(4).toNumber()).toBeCloseTo(
      published('L05').expected as number,
      4,
    );
  });

  it('N01, N02: one month under zero, half and full', () => {
    for (const id of ['N01', 'N02']) {
      const { inputs, expected } = published(id);
      const texts = (inputs['values'] as (string | number)[]).map(String);
      for (const rule of ['zero', 'half', 'full'] as const) {
        const values = dailyValues(results(texts), rule).map((one) => one.value);
        const mean = values
          .reduce((sum, one) => sum.plus(one), new Decimal(0))
          .div(values.length)
          .toNumber();
        expect(mean, `${id} ${rule}`).toBeCloseTo((expected as Record<string, number>)[rule]!, 4);
      }
    }
  });

  it('N06: the load of a non-detect carries its limit', () => {
    expect(loadLbPerDay('0.05', '0.005').toNumber()).toBe(
      (published('N06').expected as { value: number }).value,
    );
  });

  it('U01, U02: exact load factor and gal/acre·d in L/ha·d', () => {
    expect(exactLoadFactor.toDecimalPlaces(6).toNumber()).toBe(published('U01').expected);
    (published('U02').inputs['gpad'] as number[]).forEach((rate, index) =>
      expect(gpadInLPerHaDay.times(rate).toNumber()).toBeCloseTo(
        (published('U02').expected as number[])[index]!,
        1,
      ),
    );
  });

  it('E03, T06: equal complies; 2.45 rounds to 2.5 half-up and 2.4 half-even', () => {
    const { inputs } = published('E03');
    expect(
      evaluateLimit(terms({ valueText: inputs['limit'] as string }), facts([inputs['value'] as string])).word,
    ).toBe('pass');
    const limit = terms({ valueText: '2.4', decimals: 1 });
    expect(evaluateLimit(limit, facts(['2.45']))).toMatchObject({ word: 'exceed', valueText: '2.5' });
    expect(evaluateLimit({ ...limit, roundingMode: 'half-even' }, facts(['2.45']))).toMatchObject({
      word: 'pass',
      valueText: '2.4',
    });
  });

  it('V03: missing days are not imputed', () => {
    const verdict = evaluateLimit(
      terms({ statistic: 'monthly-average', valueText: '9', decimals: 1, samplesMin: 4 }),
      facts(['5.0', '6.0']),
    );
    expect(verdict).toMatchObject({ word: 'incomplete', valueText: '5.5', sampleCount: 2 });
  });

  it('31.525 is 31.53 half-up, where binary floating point gives 31.52', () => {
    expect(evaluateLimit(terms({ valueText: '50', decimals: 2 }), facts(['31.525'])).valueText).toBe('31.53');
  });

  it('1 m³/d at 1 mg/L is 0.001 kg/d', () => {
    expect(loadKgPerDay('1', '1').toNumber()).toBe(0.001);
  });
});

describe('40 CFR 445.21, limits of a non-hazardous landfill (provenance in data/published/limits-40cfr445.json)', () => {
  const subpartB = limits445.find((one) => one.id === 'us-445-B')!.limits as {
    parameter: string;
    statistic: string;
    value: number;
    unit: string;
  }[];
  const concentrations = subpartB.filter((one) => one.unit === 'mg/L');

  it('holds a daily maximum and a monthly average for each of its parameters', () => {
    const parameters = new Set(concentrations.map((one) => one.parameter));
    for (const parameter of parameters)
      expect(
        concentrations
          .filter((one) => one.parameter === parameter)
          .map((one) => one.statistic)
          .sort(),
      ).toEqual(['daily_max', 'monthly_avg']);
  });

  it.each(concentrations.map((one) => [one.parameter, one.statistic, one] as const))(
    '%s, %s: the limit itself complies, one unit of its last digit more exceeds',
    (_parameter, statistic, one) => {
      const valueText = String(one.value);
      const decimals = valueText.split('.')[1]?.length ?? 0;
      const limit = terms({
        statistic: statistic === 'daily_max' ? 'daily-maximum' : 'monthly-average',
        valueText,
        decimals,
      });
      const above = new Decimal(valueText).plus(new Decimal(10).pow(-decimals)).toFixed();
      expect(evaluateLimit(limit, facts([valueText])).word).toBe('pass');
      expect(evaluateLimit(limit, facts([above])).word).toBe('exceed');
    },
  );
});

describe('rounding once, to the limit’s digits', () => {
  // 0.204 rounds to 0.20, which equals the limit and complies (method section 11).
  it('says so where it decides, and the share follows the rounded value', () => {
    const verdict = evaluateLimit(terms({ valueText: '0.20' }), facts(['0.204']));
    expect(verdict).toMatchObject({ word: 'pass', valueText: '0.20', share: 1 });
    expect(verdict.sentence).toContain('0.204, rounded once');
    expect(evaluateLimit(terms({ valueText: '0.20' }), facts(['0.205'])).word).toBe('exceed');
  });
});
