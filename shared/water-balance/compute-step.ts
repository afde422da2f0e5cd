import { checkClosure, closes } from './check-closure.ts';
import { monthParts, type Month } from '../calendar/month.ts';
import type { BalanceParameters, EngineCover } from './engine-input.ts';
import { leakThroughDefects, type DefectLeakage } from './liner-leakage.ts';
import { soilStep, type SoilLaw } from './soil-store.ts';
import type { StepTerms } from './terms.ts';
import { reservoirStep } from './waste-store.ts';

/** Water of the ground, mm: belongs to the ground, so children and the next cover take it over. */
export interface GroundState {
  soilStoreMm: number;
  wasteStoreMm: number;
  wasteDeficitMm: number;
}

/** What falls on and is asked of the ground in one step, mm. */
export interface StepForcing {
  precipitationMm: number;
  rainMm: number;
  snowfallMm: number;
  meltMm: number;
  dSnowMm: number;
  /** Before the factors of the parameter set and the cover. */
  referencePetMm: number;
  isWet: boolean;
  isFrozen: boolean;
  dayCount: number;
  durationMonths: number;
  /** Runoff of the rain by curve number, or -1 where the cover's share rules. */
  curveRunoffMm: number;
  surfaceReturnMm: number;
  returnToWasteMm: number;
  condensateMm: number;
  /** Deficit that waste placed in this step adds; negative is free moisture. */
  placedDeficitMm: number;
  /** Store of soil placed at the start of the step, or -1 when the soil stays. */
  newSoilStoreMm: number;
  /** Mean measured head on the liner, m, or -1 where there is none. */
  measuredHeadM: number;
}

export interface StepSettings {
  soilLaw: SoilLaw;
  runoffFactor: number;
  petFactor: number;
  recessionPerMonth: number;
  channelledFraction: number;
  leakFraction: number;
  /** Leakage through defects instead of the share; null where the share rules. */
  liner: DefectLeakage | null;
}

/** A line that does not close: no result is given. */
export class BalanceDoesNotClose extends Error {
  constructor(
    readonly lines: string[],
    readonly residualMm: number,
  ) {
    super(`The ${lines.join(' and ')} line does not close: ${residualMm.toExponential(2)} mm are left over.`);
    this.name = 'BalanceDoesNotClose';
  }
}

export const isWetMonth = (month: Month, { wetMonths }: Pick<BalanceParameters, 'wetMonths'>): boolean =>
  wetMonths.includes(monthParts(month).monthOfYear);

/** Runoff share of a cover in a season, with the factor of the parameter set; never above 1. */
export const runoffShare = (cover: EngineCover, isWet: boolean, runoffFactor: number): number =>
  Math.min(1, (isWet ? cover.runoffCoefficientWet : cover.runoffCoefficientDry) * runoffFactor);

/**
 * One plot, one step: reads like the method's sections 4 to 8. Writes the terms and moves the ground on.
 * @param ground water of the ground before; after the call as the step leaves it
 * @param terms every term in mm, overwritten
 * @throws BalanceDoesNotClose when a line is left with a residual
 */
export function computeStep(
  ground: GroundState,
  cover: Readonly<EngineCover>,
  forcing: Readonly<StepForcing>,
  settings: Readonly<StepSettings>,
  terms: StepTerms,
): void {
  const { soilStoreMm: soilBeforeMm, wasteStoreMm: wasteBeforeMm } = ground;

  // Section 4: runoff and what enters the soil. The curve number speaks of the day's rain; melt keeps the share.
  const petMm = forcing.referencePetMm * settings.petFactor * cover.petFactor;
  const surfaceWaterMm = forcing.rainMm + forcing.meltMm;
  const share = runoffShare(cover, forcing.isWet, settings.runoffFactor);
  const surfaceRunoffMm =
    forcing.curveRunoffMm < 0
      ? share * surfaceWaterMm
      : Math.min(forcing.rainMm, forcing.curveRunoffMm * settings.runoffFactor) + share * forcing.meltMm;
  const infiltrationMm = surfaceWaterMm - surfaceRunoffMm + forcing.surfaceReturnMm;

  // Section 5: the soil, with the water that placed soil brings.
  const soilStartMm = forcing.newSoilStoreMm < 0 ? soilBeforeMm : forcing.newSoilStoreMm;
  const soil = soilStep(
    soilStartMm,
    infiltrationMm,
    petMm,
    cover.availableWaterMm,
    settings.soilLaw,
    forcing.isFrozen,
  );

  // A floor kept apart from the sump sends its water away as clean rain.
  const isToLeachate = cover.runoffDestination === 'leachate';
  const isFloor = cover.kind === 'lined-floor';
  const percolationMm = isFloor && !isToLeachate ? 0 : soil.percolationMm;
  const runoffMm =
    surfaceRunoffMm + soil.frozenExcessMm + (isFloor && !isToLeachate ? soil.percolationMm : 0);

  throughMembrane(percolationMm, cover, forcing.dayCount, terms);
  const { passedMm } = terms;

  // Section 7: waste. A floor without waste has neither deficit nor store.
  const freeMoistureMm = Math.max(0, -forcing.placedDeficitMm);
  const deficitBeforeMm = ground.wasteDeficitMm + Math.max(0, forcing.placedDeficitMm);
  const arrivingMm = passedMm + forcing.returnToWasteMm;
  const absorbedMm = Math.min(deficitBeforeMm, arrivingMm * (1 - settings.channelledFraction));
  const inflowMm = arrivingMm + freeMoistureMm - absorbedMm;
  let wasteStoreMm = wasteBeforeMm;
  let drainedMm = inflowMm;
  if (!isFloor) {
    const waste = reservoirStep(wasteBeforeMm, inflowMm, settings.recessionPerMonth, forcing.durationMonths);
    wasteStoreMm = waste.storeMm;
    drainedMm = waste.drainedMm;
  }

  overLiner(drainedMm + forcing.condensateMm, forcing, settings, terms);
  const runoffToLeachateMm = isToLeachate ? runoffMm : 0;

  terms.precipitationMm = forcing.precipitationMm;
  terms.rainMm = forcing.rainMm;
  terms.snowfallMm = forcing.snowfallMm;
  terms.meltMm = forcing.meltMm;
  terms.dSnowMm = forcing.dSnowMm;
  terms.petMm = petMm;
  terms.surfaceReturnMm = forcing.surfaceReturnMm;
  terms.soilWaterBroughtMm = soilStartMm - soilBeforeMm;
  terms.runoffToStormMm = isToLeachate ? 0 : runoffMm;
  terms.runoffToLeachateMm = runoffToLeachateMm;
  terms.infiltrationMm = infiltrationMm;
  terms.aetMm = soil.aetMm;
  terms.dSoilMm = soil.storeMm - soilBeforeMm;
  terms.soilStoreMm = soil.storeMm;
  terms.percolationMm = percolationMm;
  terms.returnToWasteMm = forcing.returnToWasteMm;
  terms.freeMoistureMm = freeMoistureMm;
  terms.absorbedMm = absorbedMm;
  terms.dWasteMm = wasteStoreMm - wasteBeforeMm;
  terms.wasteStoreMm = wasteStoreMm;
  terms.wasteDeficitMm = deficitBeforeMm - absorbedMm;
  terms.drainedMm = drainedMm;
  terms.condensateMm = forcing.condensateMm;
  terms.leachateMm = terms.collectedMm + runoffToLeachateMm;
  if (!closes(terms)) refuse(terms);
  ground.soilStoreMm = terms.soilStoreMm;
  ground.wasteStoreMm = terms.wasteStoreMm;
  ground.wasteDeficitMm = terms.wasteDeficitMm;
}

/** Section 6: what reaches the membrane of the cover passes as a share or through defects; the rest drains off above it. */
function throughMembrane(
  percolationMm: number,
  cover: Readonly<EngineCover>,
  dayCount: number,
  terms: StepTerms,
): void {
  if (cover.membraneDefects) {
    const through = leakThroughDefects(percolationMm, dayCount, cover.membraneDefects, null);
    terms.passedMm = through.leakedMm;
    terms.coverDrainMm = through.keptMm;
    return;
  }
  const share = cover.membranePassFraction ?? 1;
  terms.passedMm = percolationMm * share;
  terms.coverDrainMm = percolationMm * (1 - share);
}

/** Section 8: what is in the drain is collected or leaks, as a share or through defects by the head on the liner. */
function overLiner(
  inDrainMm: number,
  forcing: Readonly<StepForcing>,
  settings: Readonly<StepSettings>,
  terms: StepTerms,
): void {
  if (settings.liner) {
    const measuredM = forcing.measuredHeadM < 0 ? null : forcing.measuredHeadM;
    const leak = leakThroughDefects(inDrainMm, forcing.dayCount, settings.liner, measuredM);
    terms.leakedMm = leak.leakedMm;
    terms.collectedMm = leak.keptMm;
    terms.headMm = leak.headM * 1000;
    return;
  }
  terms.leakedMm = inDrainMm * settings.leakFraction;
  terms.collectedMm = inDrainMm * (1 - settings.leakFraction);
  terms.headMm = Math.max(0, forcing.measuredHeadM) * 1000;
}

function refuse(terms: StepTerms): never {
  const open = checkClosure(terms).filter((one) => !one.isClosed);
  throw new BalanceDoesNotClose(
    open.map((one) => one.line),
    open[0]!.residualMm,
  );
}
