import type { BalanceParameters } from '../water-balance/engine-input.ts';

/** Parameters that may be fitted to measured months, each a number of the parameter set. */
export const calibratedNames = [
  'runoffFactor',
  'petFactor',
  'channelledFraction',
  'recessionPerMonth',
  'deficitFactor',
] as const satisfies readonly (keyof BalanceParameters)[];
export type CalibratedName = (typeof calibratedNames)[number];

/**
 * What each is called and the bounds a form starts with.
 * @assumed the bounds: our choice, common practice, no source
 */
export const calibratedRegister: Record<
  CalibratedName,
  { label: string; unit: string; low: number; high: number }
> = {
  runoffFactor: { label: 'Factor on every runoff', unit: '', low: 0.5, high: 2 },
  petFactor: { label: 'Factor on potential evapotranspiration', unit: '', low: 0.6, high: 1.4 },
  channelledFraction: { label: 'Channelled share of percolation', unit: '', low: 0, high: 0.6 },
  recessionPerMonth: { label: 'Recession constant of the waste', unit: '1/month', low: 0.1, high: 2 },
  deficitFactor: { label: 'Factor on the deficit of placed waste', unit: '', low: 0, high: 2 },
};
