import { checkClosure } from './check-closure.ts';
import type { CoverKind } from './cover-types.ts';
import { soilStep, type SoilLaw } from './soil-store.ts';
import type { StepTerms } from './terms.ts';
import { reservoirStep } from './waste-store.ts';

/** Water of the ground, mm: belongs to the ground, so children and the next cover take it over. */
export interface GroundState {
  soilStoreMm: number;
  wasteStoreMm: number;
  wasteDeficitMm: number;
}

export interface StepCover {
  kind: CoverKind;
  availableWaterMm: number;
  membranePassFraction: number | null;
  runoffCoefficient: number;
  runoffDestination: 'storm-water' | 'leachate';
  petFactor: number;
}

/** What falls on and is asked of the ground in one step, mm. */
export interface StepForcing {
  precipitationMm: number;
  rainMm: number;
  snowfallMm: number;
  meltMm: number;
  dSnowMm: number;
  referencePetMm: number;
  isFrozen: boolean;
  durationMonths: number;
  surfaceReturnMm: number;
  returnToWasteMm: number;
  /** Deficit that waste placed in this step adds; negative is free moisture. */
  placedDeficitMm: number;
  /** Store of soil placed at the start of the step, or null when the soil stays. */
  newSoilStoreMm: number | null;
}

export interface StepSettings {
  soilLaw: SoilLaw;
  recessionPerMonth: number;
  channelledFraction: number;
  leakFraction: number;
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

/**
 * One plot, one step: reads like the method's sections 4 to 8.
 * @returns every term in mm, and the ground as the step leaves it
 * @throws BalanceDoesNotClose when a line is left with a residual
 */
export function computeStep(
  before: Readonly<GroundState>,
  cover: Readonly<StepCover>,
  forcing: Readonly<StepForcing>,
  settings: Readonly<StepSettings>,
): { terms: StepTerms; after: GroundState } {
  // Section 4: runoff and what enters the soil.
  const petMm = forcing.referencePetMm * cover.petFactor;
  const surfaceWaterMm = forcing.rainMm + forcing.meltMm;
  const coefficientRunoffMm = cover.runoffCoefficient * surfaceWaterMm;
  const infiltrationMm = surfaceWaterMm - coefficientRunoffMm + forcing.surfaceReturnMm;

  // Section 5: the soil, with the water that placed soil brings.
  const soilStartMm = forcing.newSoilStoreMm ?? before.soilStoreMm;
  const soil = soilStep({
    storeBeforeMm: soilStartMm,
    infiltrationMm,
    petMm,
    capacityMm: cover.availableWaterMm,
    law: settings.soilLaw,
    isFrozen: forcing.isFrozen,
  });

  // A floor kept apart from the sump sends its water away as clean rain.
  const isSeparatedFloor = cover.kind === 'lined-floor' && cover.runoffDestination === 'storm-water';
  const percolationMm = isSeparatedFloor ? 0 : soil.percolationMm;
  const runoffMm = coefficientRunoffMm + soil.frozenExcessMm + (isSeparatedFloor ? soil.percolationMm : 0);
  const isToLeachate = cover.runoffDestination === 'leachate';

  // Section 6: the membrane of the cover.
  const passFraction = cover.membranePassFraction ?? 1;
  const passedMm = percolationMm * passFraction;

  // Section 7: waste. A floor without waste has neither deficit nor store.
  const hasWaste = cover.kind !== 'lined-floor';
  const freeMoistureMm = Math.max(0, -forcing.placedDeficitMm);
  const deficitBeforeMm = before.wasteDeficitMm + Math.max(0, forcing.placedDeficitMm);
  const arrivingMm = passedMm + forcing.returnToWasteMm;
  const absorbedMm = Math.min(deficitBeforeMm, arrivingMm * (1 - settings.channelledFraction));
  const inflowMm = arrivingMm + freeMoistureMm - absorbedMm;
  const waste = hasWaste
    ? reservoirStep({
        storeBeforeMm: before.wasteStoreMm,
        inflowMm,
        recessionPerMonth: settings.recessionPerMonth,
        durationMonths: forcing.durationMonths,
      })
    : { storeMm: before.wasteStoreMm, drainedMm: inflowMm };

  // Section 8: the liner.
  const leakedMm = waste.drainedMm * settings.leakFraction;
  const collectedMm = waste.drainedMm * (1 - settings.leakFraction);
  const runoffToLeachateMm = isToLeachate ? runoffMm : 0;

  const terms: StepTerms = {
    precipitationMm: forcing.precipitationMm,
    rainMm: forcing.rainMm,
    snowfallMm: forcing.snowfallMm,
    meltMm: forcing.meltMm,
    dSnowMm: forcing.dSnowMm,
    petMm,
    surfaceReturnMm: forcing.surfaceReturnMm,
    soilWaterBroughtMm: soilStartMm - before.soilStoreMm,
    runoffToStormMm: isToLeachate ? 0 : runoffMm,
    runoffToLeachateMm,
    infiltrationMm,
    aetMm: soil.aetMm,
    dSoilMm: soil.storeMm - before.soilStoreMm,
    soilStoreMm: soil.storeMm,
    percolationMm,
    passedMm,
    coverDrainMm: percolationMm * (1 - passFraction),
    returnToWasteMm: forcing.returnToWasteMm,
    freeMoistureMm,
    absorbedMm,
    dWasteMm: waste.storeMm - before.wasteStoreMm,
    wasteStoreMm: waste.storeMm,
    wasteDeficitMm: deficitBeforeMm - absorbedMm,
    drainedMm: waste.drainedMm,
    collectedMm,
    leakedMm,
    leachateMm: collectedMm + runoffToLeachateMm,
  };
  const open = checkClosure(terms).filter((one) => !one.isClosed);
  if (open.length)
    throw new BalanceDoesNotClose(
      open.map((one) => one.line),
      open[0]!.residualMm,
    );
  return {
    terms,
    after: { soilStoreMm: soil.storeMm, wasteStoreMm: waste.storeMm, wasteDeficitMm: terms.wasteDeficitMm },
  };
}
