import type { PetMethod, RunoffMethod } from './engine-input.ts';
import type { SoilLaw } from './soil-store.ts';

/** What the methods are called wherever one is chosen or shown. */
export const petMethodNames: Record<PetMethod, string> = {
  thornthwaite: 'Thornthwaite 1948',
  hargreaves: 'Hargreaves–Samani 1985, FAO-56 eq. 52',
  'penman-monteith': 'Penman–Monteith, FAO-56 eq. 6',
  pan: 'pan evaporation × coefficient',
  given: 'given values',
};

export const runoffMethodNames: Record<RunoffMethod, string> = {
  coefficient: 'share of rain and melt by cover and season',
  'curve-number': 'curve number on each day’s rain (TR-55); the share for melt and where days are missing',
};

export const soilLawNames: Record<SoilLaw, string> = {
  exponential: 'exponential drying, Thornthwaite and Mather 1957',
  'equal-availability': 'equal availability until the store is empty',
  linear: 'linear withdrawal',
};

export const leakMethodNames = {
  fraction: 'entered share of what drains',
  defects: 'through defects by the head (Giroud 1997)',
} as const;
