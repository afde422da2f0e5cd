import { soilStep, type SoilLaw } from './soil-store.ts';
import { spinUpSoilStore } from './spin-up.ts';

export interface TryBalanceMonth {
  runoffMm: number;
  infiltrationMm: number;
  surplusMm: number;
  /** Accumulated potential water loss AWC·ln(S/AWC), negative; null at an empty store and under another law. */
  apwlMm: number | null;
  storeMm: number;
  dStoreMm: number;
  aetMm: number;
  deficitMm: number;
  percolationMm: number;
  residualMm: number;
}

export interface TryBalanceInputs {
  precipitationMm: readonly number[];
  petMm: readonly number[];
  runoffCoefficient: readonly number[];
  capacityMm: number;
  soilLaw: SoilLaw;
  /** Store before the first month, mm, or repeat the year until it agrees with itself. */
  start: number | 'spin-up';
}

/** Twelve months of one soil cover with every term; the same laws as a run, nothing stored. */
export function tryBalance(input: TryBalanceInputs): {
  months: TryBalanceMonth[];
  startMm: number;
  cycleCount: number;
} {
  const { precipitationMm, petMm, runoffCoefficient, capacityMm, soilLaw } = input;
  const year = precipitationMm.map((rain, index) => ({
    infiltrationMm: rain * (1 - runoffCoefficient[index]!),
    petMm: petMm[index]!,
    isFrozen: false,
  }));
  const spun =
    input.start === 'spin-up'
      ? spinUpSoilStore(year, capacityMm, soilLaw)
      : { storeMm: Math.min(capacityMm, input.start), cycleCount: 0 };
  let before = spun.storeMm;
  const months = year.map((month, index): TryBalanceMonth => {
    const step = soilStep(before, month.infiltrationMm, month.petMm, capacityMm, soilLaw, month.isFrozen);
    const runoffMm = precipitationMm[index]! * runoffCoefficient[index]!;
    const dStoreMm = step.storeMm - before;
    before = step.storeMm;
    return {
      runoffMm,
      infiltrationMm: month.infiltrationMm,
      surplusMm: month.infiltrationMm - month.petMm,
      apwlMm:
        soilLaw === 'exponential' && step.storeMm > 0 && capacityMm > 0
          ? capacityMm * Math.log(step.storeMm / capacityMm)
          : null,
      storeMm: step.storeMm,
      dStoreMm,
      aetMm: step.aetMm,
      deficitMm: month.petMm - step.aetMm,
      percolationMm: step.percolationMm,
      residualMm: precipitationMm[index]! - runoffMm - step.aetMm - dStoreMm - step.percolationMm,
    };
  });
  return { months, startMm: spun.storeMm, cycleCount: spun.cycleCount };
}
