import { monthName } from '../calendar/month.ts';
import { isWetMonth } from './compute-step.ts';
import { growingFromC, monthCurveRunoffMm } from './curve-number.ts';
import type { EngineCover, EngineInput, MonthClimate } from './engine-input.ts';
import { substitutionWords, type Substitution } from './penman-monteith.ts';
import { recordHeatIndex, referencePet, type MonthPet } from './potential-evapotranspiration.ts';
import { computeDailySnow, computeSnow, type SnowMonth } from './snow.ts';
import { monthSpan, type MonthSpan } from './split-month.ts';

/** A month's climate with what the site-wide parts of the method make of it. */
export interface MonthForcing {
  row: MonthClimate;
  span: MonthSpan;
  snow: SnowMonth;
  pet: MonthPet;
  isWet: boolean;
  isFrozen: boolean;
  /** Runoff of each day by curve number, mm; null where the covers' shares rule. */
  curveRunoffMm: Map<number, number[]> | null;
}

/** PET of every month of the record; depends on the climate and the method only. */
export function recordPet(input: EngineInput): MonthPet[] {
  const { climate, latitudeDeg, elevationM, parameters } = input;
  const site = { latitudeDeg, elevationM, heatIndex: recordHeatIndex(climate) };
  return climate.map((row, index) =>
    referencePet(row, site, parameters, { before: climate[index - 1], after: climate[index + 1] }),
  );
}

function snowOf(packMm: number, row: MonthClimate, { snow }: EngineInput['parameters']): SnowMonth {
  if (snow.isOn && row.days?.precipitationMm && row.days.tMeanC)
    return computeDailySnow(packMm, row.days.precipitationMm, row.days.tMeanC, snow.meltMmPerCDay);
  return computeSnow(packMm, row.precipitationMm, row.tMeanC ?? 20, snow);
}

/** Rain of the days of a month: as computed by days, or the recorded depth × the month's share of rain. */
function rainDays(row: MonthClimate, snow: SnowMonth): number[] | null {
  if (snow.days) return snow.days.rainMm;
  if (!row.days?.precipitationMm) return null;
  const share = row.precipitationMm > 0 ? snow.rainMm / row.precipitationMm : 0;
  return row.days.precipitationMm.map((depth) => depth * share);
}

const coversInUse = ({ cells, covers }: EngineInput): EngineCover[] =>
  [
    ...new Set(
      cells.flatMap((cell) => cell.plots.flatMap((plot) => plot.periods.map((period) => period.coverTypeId))),
    ),
  ].map((id) => covers[id]!);

const curveNumbersOf = (input: EngineInput): number[] =>
  input.parameters.runoffMethod === 'curve-number'
    ? [...new Set(coversInUse(input).flatMap((cover) => (cover.curveNumber ? [cover.curveNumber] : [])))]
    : [];

const listed = (months: readonly string[]) =>
  months.length === 1 ? monthName(months[0]!) : `${months.length} months from ${monthName(months[0]!)}`;

/** Sentences about what the months needed that the record did not have. */
function warningsOf(input: EngineInput, months: readonly MonthForcing[]): string[] {
  const named = (test: (month: MonthForcing) => boolean) =>
    months.filter(test).map((month) => month.row.month);
  const sentences: string[] = [];
  const say = (found: string[], sentence: (words: string) => string) => {
    if (found.length) sentences.push(sentence(listed(found)));
  };
  for (const substitution of Object.keys(substitutionWords) as Substitution[])
    say(
      named(({ pet }) => pet.substitutions.includes(substitution)),
      (words) => `${words}: ${substitutionWords[substitution]}.`,
    );
  say(
    named(({ pet }) => pet.isOutsideRadiation),
    (words) => `${words}: radiation formulas are not reliable in winter beyond 55° of latitude.`,
  );
  if (input.parameters.petMethod === 'thornthwaite')
    say(
      named(({ row }) => (row.tMeanC ?? 0) > 37.5),
      (words) => `${words}: hotter than the table goes; 37.5 °C was used.`,
    );
  say(
    named(({ snow, row }) => snow.packMm > 1 && (row.tMeanC ?? 0) > 10),
    (words) => `${words}: snow remains above 10 °C. Look at the snow settings.`,
  );
  say(
    named(({ isFrozen }) => isFrozen),
    (words) => `${words}: counted as frozen; no percolation, the excess runs off.`,
  );
  if (input.parameters.runoffMethod === 'curve-number') {
    const inUse = coversInUse(input);
    const without = inUse.filter((cover) => cover.curveNumber === null);
    if (without.length)
      sentences.push(
        `${without.map((cover) => cover.name).join(', ')}: no curve number, so the runoff share is used. Enter it under Site, cover types.`,
      );
    if (without.length < inUse.length)
      say(
        named(({ curveRunoffMm }) => curveRunoffMm === null),
        (words) => `${words}: no daily rain, so the covers’ runoff shares were used, not the curve number.`,
      );
  }
  return sentences;
}

/**
 * Snow, PET, frost and curve-number runoff of every month, in order.
 * @throws PetMissing or RangeError naming the month and what to bring
 */
export function prepareMonths(
  input: EngineInput,
  pet: readonly MonthPet[],
): { months: MonthForcing[]; warnings: string[] } {
  const { parameters, climate } = input;
  const curveNumbers = curveNumbersOf(input);
  let packMm = 0;
  let daysBefore: number[] = [];
  const months = climate.map((row, index): MonthForcing => {
    if ((parameters.snow.isOn || parameters.isFrostOn) && row.tMeanC === null)
      throw new RangeError(
        `${monthName(row.month)} has no mean temperature. Bring it, or switch snow and frost off.`,
      );
    const snow = snowOf(packMm, row, parameters);
    packMm = snow.packMm;
    const rain = curveNumbers.length ? rainDays(row, snow) : null;
    const isGrowing = (row.tMeanC ?? 20) >= growingFromC;
    const curveRunoffMm =
      rain && new Map(curveNumbers.map((one) => [one, monthCurveRunoffMm(rain, daysBefore, one, isGrowing)]));
    daysBefore = rain ?? [];
    return {
      row,
      span: monthSpan(row.month),
      snow,
      pet: pet[index]!,
      isWet: isWetMonth(row.month, parameters),
      isFrozen: parameters.isFrostOn && (row.tMeanC ?? 20) <= parameters.tFrostC,
      curveRunoffMm,
    };
  });
  return { months, warnings: warningsOf(input, months) };
}
