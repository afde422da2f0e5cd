import {
  annualHeatIndex,
  monthlyHeatIndex,
  thornthwaiteMm,
  thornthwaiteUnadjustedMm,
} from '../water-balance/thornthwaite.ts';
import type { SoilLaw } from '../water-balance/soil-store.ts';
import { daylightHours } from '../water-balance/solar-geometry.ts';
import { tryBalance, type TryBalanceMonth } from '../water-balance/try-balance.ts';

/** A published case as it is kept in `data/published`. */
export interface PublishedCase {
  id: string;
  title: string;
  source: string;
  source_locator: string;
  read_or_memory: string;
  tolerance_note: string;
  inputs: Record<string, unknown>;
  expected: Record<string, unknown>;
}

export interface ComparedColumn {
  name: string;
  unit: string;
  decimals: number;
  printed: readonly number[];
  computed: readonly number[];
  /** Largest difference the case's own note allows. */
  tolerance: number;
}

/** One published table beside the same numbers computed here, now. */
export interface ComputedCase {
  id: string;
  title: string;
  source: string;
  locator: string;
  isFromMemory: boolean;
  note: string;
  law: string;
  given: { name: string; unit: string; values: readonly number[] }[];
  columns: ComparedColumn[];
}

const numbers = (value: unknown): number[] => {
  if (!Array.isArray(value) || value.some((one) => typeof one !== 'number'))
    throw new RangeError('A published column is not a list of numbers.');
  return value as number[];
};

interface BalancePlan {
  id: string;
  law: SoilLaw;
  lawWords: string;
  start: number | 'spin-up';
  columns: {
    name: string;
    expected: string;
    pick: (month: TryBalanceMonth) => number;
    decimals: number;
    tolerance: number;
  }[];
}

const plans: BalancePlan[] = [
  {
    id: 'fenn1975-cincinnati',
    law: 'exponential',
    lawWords: 'Soil drying: exponential law, Thornthwaite and Mather 1957.',
    start: 'spin-up',
    columns: [
      { name: 'Runoff', expected: 'runoff_mm', pick: (month) => month.runoffMm, decimals: 1, tolerance: 0.5 },
      {
        name: 'Evapotranspiration',
        expected: 'aet_mm',
        pick: (month) => month.aetMm,
        decimals: 1,
        tolerance: 1.2,
      },
      {
        name: 'Soil water, month end',
        expected: 'st_mm',
        pick: (month) => month.storeMm,
        decimals: 1,
        tolerance: 1.5,
      },
      {
        name: 'Percolation',
        expected: 'perc_mm',
        pick: (month) => month.percolationMm,
        decimals: 1,
        tolerance: 0.5,
      },
    ],
  },
  {
    id: 'dourado2010-petrolina',
    law: 'exponential',
    lawWords: 'Exponential law, the year repeated until December agrees with itself.',
    start: 'spin-up',
    columns: [
      {
        name: 'Soil water, month end',
        expected: 'st_mm',
        pick: (month) => month.storeMm,
        decimals: 4,
        tolerance: 0.01,
      },
      {
        name: 'Deficit',
        expected: 'deficit_mm',
        pick: (month) => month.deficitMm,
        decimals: 1,
        tolerance: 0.1,
      },
    ],
  },
  {
    id: 'ritter-rockford',
    law: 'equal-availability',
    lawWords: 'Equal availability: the soil gives all that is asked until it is empty.',
    start: 90,
    columns: [
      {
        name: 'Change of soil water',
        expected: 'dst_mm',
        pick: (month) => month.dStoreMm,
        decimals: 1,
        tolerance: 1e-9,
      },
      {
        name: 'Soil water, month end',
        expected: 'st_mm',
        pick: (month) => month.storeMm,
        decimals: 1,
        tolerance: 1e-9,
      },
      {
        name: 'Evapotranspiration',
        expected: 'aet_mm',
        pick: (month) => month.aetMm,
        decimals: 1,
        tolerance: 1e-9,
      },
      {
        name: 'Deficit',
        expected: 'deficit_mm',
        pick: (month) => month.deficitMm,
        decimals: 1,
        tolerance: 1e-9,
      },
      {
        name: 'Percolation',
        expected: 'surplus_mm',
        pick: (month) => month.percolationMm,
        decimals: 1,
        tolerance: 1e-9,
      },
    ],
  },
];

const about = (published: PublishedCase) => ({
  id: published.id,
  title: published.title,
  source: published.source,
  locator: published.source_locator,
  isFromMemory: published.read_or_memory.startsWith('memory'),
  note: published.tolerance_note,
});

function computeBalanceCase(published: PublishedCase, plan: BalancePlan): ComputedCase {
  const precipitationMm = numbers(published.inputs['p_mm']);
  const petMm = numbers(published.inputs['pet_mm']);
  const runoffCoefficient = published.inputs['runoff_coefficient']
    ? numbers(published.inputs['runoff_coefficient'])
    : precipitationMm.map(() => 0);
  const { months } = tryBalance({
    precipitationMm,
    petMm,
    runoffCoefficient,
    capacityMm: Number(published.inputs['capacity_mm']),
    soilLaw: plan.law,
    start: plan.start,
  });
  return {
    ...about(published),
    law: plan.lawWords,
    given: [
      { name: 'Rain', unit: 'mm', values: precipitationMm },
      { name: 'PET', unit: 'mm', values: petMm },
    ],
    columns: plan.columns.map((column) => ({
      name: column.name,
      unit: 'mm',
      decimals: column.decimals,
      tolerance: column.tolerance,
      printed: numbers(published.expected[column.expected]),
      computed: months.map(column.pick),
    })),
  };
}

/** Thornthwaite's law over twelve means; daylight from the declinations the page gives, unrounded. */
function computeRichmondHill(published: PublishedCase): ComputedCase {
  const tMeanC = numbers(published.inputs['t_c']);
  const declination = numbers(published.inputs['declination_rad']);
  const dayCount = numbers(published.inputs['days_in_month']);
  const heatIndex = annualHeatIndex(tMeanC);
  const hotMonths = 'table' as const;
  const latitudeDeg = Number(published.inputs['latitude_deg']);
  const column = (
    name: string,
    expected: string,
    unit: string,
    decimals: number,
    tolerance: number,
    computed: number[],
  ): ComparedColumn => ({
    name,
    unit,
    decimals,
    tolerance,
    printed: numbers(published.expected[expected]),
    computed,
  });
  return {
    ...about(published),
    law: 'Thornthwaite 1948, constants at full length, daylight from the declinations of the page.',
    given: [{ name: 'Mean temperature', unit: '°C', values: tMeanC }],
    columns: [
      column('Heat index', 'heat_index_i', '', 2, 0.01, tMeanC.map(monthlyHeatIndex)),
      column(
        'PET, 30 days of 12 h',
        'pet_unadjusted_mm',
        'mm',
        2,
        0.02,
        tMeanC.map((mean) => thornthwaiteUnadjustedMm(mean, heatIndex, hotMonths)),
      ),
      column(
        'PET',
        'pet_adjusted_mm',
        'mm',
        1,
        0.1,
        tMeanC.map((mean, index) =>
          thornthwaiteMm({
            tMeanC: mean,
            heatIndex,
            daylightHours: daylightHours(latitudeDeg, declination[index]!),
            dayCount: dayCount[index]!,
            hotMonths,
          }),
        ),
      ),
    ],
  };
}

/** Every published monthly table that is computed live. @throws RangeError when a case or one of its columns is missing */
export function computePublishedCases(cases: readonly PublishedCase[]): ComputedCase[] {
  const find = (id: string) => {
    const found = cases.find((one) => one.id === id);
    if (!found) throw new RangeError(`The published case ${id} is missing.`);
    return found;
  };
  return [
    ...plans.map((plan) => computeBalanceCase(find(plan.id), plan)),
    computeRichmondHill(find('step-richmond-hill-pet')),
  ];
}
