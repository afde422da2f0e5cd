import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { beforeAll, describe, expect, it } from 'vitest';
import { hargreavesMmPerDay } from '#shared/water-balance/hargreaves.ts';
import { annualHeatIndex, thornthwaiteMm } from '#shared/water-balance/thornthwaite.ts';
import { daylightHours, extraterrestrialRadiation } from '#shared/water-balance/solar-geometry.ts';
import { daysInMonth, monthOf } from '#shared/calendar/month.ts';

/**
 * Wichita, Kansas, 1980 to 2011, monthly: NOAA GHCN observations, against the stored test output of SPEI, a public R library.
 * That library takes the power law throughout, the declination 0.4093 sin(2πJ/365 − 1.405) of the 15th, 28-day Februaries.
 */
const latitudeDeg = 37.6475;
const read = (name: string) =>
  parse(readFileSync(new URL(`../../data/climate/${name}`, import.meta.url)), {
    columns: true,
    cast: true,
  }) as Record<string, number>[];
const middles = [15, 46, 74, 105, 135, 166, 196, 227, 258, 288, 319, 349];
const monthDays = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31];

describe('Wichita against an independent library', () => {
  let observed: Record<string, number>[];
  let reference: Record<string, number>[];
  beforeAll(() => {
    observed = read('wichita_ks_monthly_1980_2011.csv');
    reference = read('wichita_ks_reference_pet.csv');
  });

  it('both files hold the same 382 months', () => {
    expect(reference).toHaveLength(382);
    expect(observed.slice(0, 382).map((row) => [row['year'], row['month']])).toEqual(
      reference.map((row) => [row['year'], row['month']]),
    );
  });

  it('Thornthwaite agrees within 0.001 mm in every month', () => {
    const means = Array.from({ length: 12 }, (_, index) => {
      const own = observed.slice(0, 382).filter((row) => row['month'] === index + 1);
      return own.reduce((sum, row) => sum + row['tmean_c']!, 0) / own.length;
    });
    const heatIndex = annualHeatIndex(means);
    expect(heatIndex).toBeCloseTo(67.7543, 3);
    const worst = Math.max(
      ...reference.map((row, index) => {
        const month = row['month']! - 1;
        const declination = 0.4093 * Math.sin((2 * Math.PI * middles[month]!) / 365 - 1.405);
        const computed = thornthwaiteMm({
          tMeanC: observed[index]!['tmean_c']!,
          heatIndex,
          daylightHours: daylightHours(latitudeDeg, declination),
          dayCount: monthDays[month]!,
          hotMonths: 'power',
        });
        return Math.abs(computed - row['thornthwaite_mm']!);
      }),
    );
    expect(worst).toBeLessThanOrEqual(0.001);
  });

  it('Hargreaves agrees within 0.6 mm a month: the library uses 37.6 and 0.0172 J where FAO-56 has 24·60/π·0.0820 and 2πJ/365', () => {
    const worst = Math.max(
      ...reference.map((row, index) => {
        const { tmin_c: tMinC, tmax_c: tMaxC } = observed[index] as { tmin_c: number; tmax_c: number };
        const month = row['month']!;
        const radiationMjPerM2Day = extraterrestrialRadiation(latitudeDeg, middles[month - 1]!);
        return Math.abs(
          hargreavesMmPerDay({ tMinC, tMaxC, radiationMjPerM2Day }) * monthDays[month - 1]! -
            row['hargreaves_mm']!,
        );
      }),
    );
    expect(worst).toBeLessThanOrEqual(0.6);
  });

  it('leap Februaries have 29 days here, which the library leaves out', () => {
    expect(daysInMonth(monthOf(1984, 2))).toBe(29);
  });
});
