import type { CoverKind } from '#shared/water-balance/cover-types.ts';
import type { EngineCover } from '#shared/water-balance/engine-input.ts';
import type { DefectLeakage } from '#shared/water-balance/liner-leakage.ts';
import type { SiteRecord } from '../sites/site-service.ts';

const number = (text: string | null) => (text === null ? null : Number(text));

/** A cover type of the site as the engine takes it. */
export const engineCover = (type: SiteRecord['coverTypes'][number]): EngineCover => ({
  kind: type.kind as CoverKind,
  name: type.name,
  availableWaterMm: Number(type.availableWaterMm),
  membranePassFraction: number(type.membranePassFraction),
  membraneDefects: type.membraneDefects as DefectLeakage | null,
  runoffCoefficientWet: Number(type.runoffCoefficientWet),
  runoffCoefficientDry: Number(type.runoffCoefficientDry),
  curveNumber: number(type.curveNumber),
  runoffDestination: type.runoffDestination,
  petFactor: Number(type.petFactor),
});
