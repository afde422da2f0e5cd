import type { BalanceParameters, EngineCover, MonthClimate } from './engine-input.ts';
import { defectLeakageM3PerS, giroudHeadM, mcEnroeHeadM } from './liner-leakage.ts';
import type { MonthPet } from './potential-evapotranspiration.ts';
import type { StepTerms, TermName } from './terms.ts';
import { termRegister } from './terms.ts';

/** One numbered line of a working: what, how in words and with its values, result, where from. */
export interface WorkingLine {
  line: number;
  what: string;
  how: string;
  /** The formula with the values in it; null where the line is an input. */
  withValues: string | null;
  value: number;
  unit: string;
  source: string | null;
}

export interface StepForWorking {
  terms: StepTerms;
  areaM2: number;
  dayCount: number;
  daysInMonth: number;
  cover: EngineCover;
  runoffCoefficient: number;
  parameters: BalanceParameters;
  climate: MonthClimate;
  pet: MonthPet;
  heatIndex: number | null;
  daylightHours: number;
}

type Row = Omit<WorkingLine, 'line'>;

/** The chain of terms that a term rests on, in the order they are computed. */
const toLeachate: TermName[] = ['passedMm', 'returnToWasteMm', 'freeMoistureMm', 'absorbedMm'];
const toSoil: TermName[] = ['rainMm', 'meltMm', 'surfaceReturnMm', 'infiltrationMm', 'petMm'];
const chains: Partial<Record<TermName, TermName[]>> = {
  precipitationMm: ['rainMm', 'snowfallMm'],
  dSnowMm: ['snowfallMm', 'meltMm'],
  runoffToStormMm: ['rainMm', 'meltMm'],
  runoffToLeachateMm: ['rainMm', 'meltMm'],
  infiltrationMm: ['rainMm', 'meltMm', 'surfaceReturnMm'],
  aetMm: toSoil,
  dSoilMm: [...toSoil, 'soilStoreMm'],
  soilStoreMm: toSoil,
  percolationMm: [...toSoil, 'soilStoreMm'],
  passedMm: ['percolationMm'],
  coverDrainMm: ['percolationMm', 'passedMm'],
  absorbedMm: ['percolationMm', 'passedMm', 'returnToWasteMm'],
  dWasteMm: [...toLeachate, 'wasteStoreMm'],
  wasteStoreMm: toLeachate,
  drainedMm: toLeachate,
  headMm: ['drainedMm', 'condensateMm'],
  leakedMm: [...toLeachate, 'drainedMm', 'condensateMm', 'headMm'],
  collectedMm: [...toLeachate, 'drainedMm', 'condensateMm', 'leakedMm'],
  leachateMm: [
    'percolationMm',
    ...toLeachate,
    'drainedMm',
    'condensateMm',
    'leakedMm',
    'collectedMm',
    'runoffToLeachateMm',
  ],
};

const mm = (value: number) => value.toFixed(2).replace('-', '−');
const plain = (value: number) => String(Number(value.toPrecision(4))).replace('-', '−');

const input = (
  what: string,
  how: string,
  value: number,
  unit: string,
  source: string | null = null,
): Row => ({
  what,
  how,
  withValues: null,
  value,
  unit,
  source,
});

/** Length of the step and the share of an even inflow that stays in the reservoir at its end. */
function reservoirOf({ dayCount, daysInMonth, parameters }: StepForWorking) {
  const months = dayCount / daysInMonth;
  const exponent = parameters.recessionPerMonth * months;
  return {
    months,
    decay: Math.exp(-exponent),
    kept: exponent === 0 ? 1 : -Math.expm1(-exponent) / exponent,
  };
}

const isByDefects = ({ parameters }: StepForWorking) => parameters.leakMethod === 'defects';
const wasteInflow = (t: StepTerms) => t.passedMm + t.returnToWasteMm + t.freeMoistureMm - t.absorbedMm;
const surfaceRunoffMm = (t: StepTerms) => t.rainMm + t.meltMm + t.surfaceReturnMm - t.infiltrationMm;
const hasCurveRunoff = (step: StepForWorking) =>
  step.parameters.runoffMethod === 'curve-number' &&
  step.cover.curveNumber !== null &&
  Boolean(step.climate.days?.precipitationMm);

/** The soil at the start of drying or filling: as the step before left it, with the soil placed on this day. */
const soilStartMm = (t: StepTerms) => t.soilStoreMm - t.dSoilMm + t.soilWaterBroughtMm;

function soilFormula(term: 'aetMm' | 'soilStoreMm', step: StepForWorking): string {
  const { terms: t, cover, parameters } = step;
  const [start, enters, pet, full] = [soilStartMm(t), t.infiltrationMm, t.petMm, cover.availableWaterMm];
  const surplus = enters - pet;
  if (full === 0) return term === 'aetMm' ? `min(${mm(enters)}, ${mm(pet)})` : 'no store';
  if (surplus >= 0)
    return term === 'aetMm' ? `PET, ${mm(pet)}` : `min(${mm(full)}, ${mm(start)} + ${mm(surplus)})`;
  if (parameters.soilLaw === 'exponential')
    return term === 'aetMm'
      ? `${mm(enters)} + ${mm(start)} × (1 − exp(${mm(surplus)} ÷ ${mm(full)}))`
      : `${mm(start)} × exp(${mm(surplus)} ÷ ${mm(full)})`;
  const withdrawn =
    parameters.soilLaw === 'linear'
      ? `min(${mm(start)}, ${mm(-surplus)} × ${mm(start)} ÷ ${mm(full)})`
      : `min(${mm(start)}, ${mm(-surplus)})`;
  return term === 'aetMm' ? `${mm(enters)} + ${withdrawn}` : `${mm(start)} − ${withdrawn}`;
}

/** The formula of a term with the values of the step in it; null where the term is given. */
function valuesOf(term: TermName, step: StepForWorking): string | null {
  const { terms: t, parameters, cover } = step;
  const { decay, kept } = reservoirOf(step);
  const runoff = hasCurveRunoff(step)
    ? `curve number ${cover.curveNumber} on each day, and ${plain(step.runoffCoefficient)} × ${mm(t.meltMm)}`
    : `${plain(step.runoffCoefficient)} × (${mm(t.rainMm)} + ${mm(t.meltMm)})`;
  switch (term) {
    case 'precipitationMm':
      return `${mm(t.rainMm)} + ${mm(t.snowfallMm)}`;
    case 'dSnowMm':
      return `${mm(t.snowfallMm)} − ${mm(t.meltMm)}`;
    case 'petMm':
      return `${mm(step.pet.petMm)} × ${plain(parameters.petFactor)} × ${plain(cover.petFactor)} × ${step.dayCount}/${step.daysInMonth}`;
    case 'runoffToStormMm':
      return cover.runoffDestination === 'storm-water' ? runoff : 'all runoff goes to leachate';
    case 'runoffToLeachateMm':
      return cover.runoffDestination === 'leachate' ? runoff : 'all runoff goes to storm water';
    case 'infiltrationMm':
      return `${mm(t.rainMm)} + ${mm(t.meltMm)} + ${mm(t.surfaceReturnMm)} − ${mm(surfaceRunoffMm(t))}`;
    case 'aetMm':
    case 'soilStoreMm':
      return soilFormula(term, step);
    case 'dSoilMm':
      return `${mm(t.soilStoreMm)} − ${mm(t.soilStoreMm - t.dSoilMm)}`;
    case 'percolationMm':
      return `max(0, ${mm(soilStartMm(t))} + ${mm(t.infiltrationMm - t.petMm)} − ${mm(cover.availableWaterMm)})`;
    case 'passedMm':
      if (cover.membraneDefects) return 'min(percolation, leakage through defects by the head)';
      return `${mm(t.percolationMm)} × ${plain(cover.membranePassFraction ?? 1)}`;
    case 'coverDrainMm':
      return `${mm(t.percolationMm)} − ${mm(t.passedMm)}`;
    case 'absorbedMm':
      return `min(${mm(t.wasteDeficitMm + t.absorbedMm)}, ${mm(t.passedMm + t.returnToWasteMm)} × (1 − ${plain(parameters.channelledFraction)}))`;
    case 'dWasteMm':
      return `${mm(t.wasteStoreMm)} − ${mm(t.wasteStoreMm - t.dWasteMm)}`;
    case 'wasteStoreMm':
      return `${mm(t.wasteStoreMm - t.dWasteMm)} × ${plain(decay)} + ${mm(wasteInflow(t))} × ${plain(kept)}`;
    case 'wasteDeficitMm':
      return `${mm(t.wasteDeficitMm + t.absorbedMm)} − ${mm(t.absorbedMm)}`;
    case 'drainedMm':
      if (cover.kind === 'lined-floor') return 'no waste: what arrives drains';
      return `${mm(wasteInflow(t))} × (1 − ${plain(kept)}) + ${mm(t.wasteStoreMm - t.dWasteMm)} × (1 − ${plain(decay)})`;
    case 'leakedMm':
      if (isByDefects(step)) return leakFormula(step);
      return `(${mm(t.drainedMm)} + ${mm(t.condensateMm)}) × ${plain(parameters.leakFraction)}`;
    case 'collectedMm':
      return `${mm(t.drainedMm)} + ${mm(t.condensateMm)} − ${mm(t.leakedMm)}`;
    case 'leachateMm':
      return `${mm(t.collectedMm)} + ${mm(t.runoffToLeachateMm)}`;
    default:
      return null;
  }
}

function coverSettings(uses: ReadonlySet<TermName>, step: StepForWorking): Row[] {
  const { cover } = step;
  const set = (what: string, value: number, unit: string) =>
    input(what, 'set', value, unit, `cover ${cover.name}`);
  const rows: Row[] = [];
  if (uses.has('infiltrationMm') || uses.has('runoffToLeachateMm') || uses.has('runoffToStormMm'))
    rows.push(
      set('Runoff share', step.runoffCoefficient, ''),
      ...(hasCurveRunoff(step) ? [set('Curve number, average condition', cover.curveNumber!, '')] : []),
    );
  if (uses.has('petMm')) rows.push(set('Cover factor on PET', cover.petFactor, ''));
  if (uses.has('soilStoreMm') || uses.has('aetMm'))
    rows.push(set('Soil store, full', cover.availableWaterMm, 'mm'));
  if (uses.has('passedMm') && cover.membraneDefects)
    rows.push(set('Defects of the membrane', cover.membraneDefects.defectsPerHa, '1/ha'));
  else if (uses.has('passedMm') && cover.membranePassFraction !== null)
    rows.push(set('Share through the membrane', cover.membranePassFraction, ''));
  return rows;
}

function parameterSettings(uses: ReadonlySet<TermName>, step: StepForWorking): Row[] {
  const { parameters } = step;
  const set = (what: string, value: number, unit: string) => input(what, 'set', value, unit, 'parameter set');
  const rows: Row[] = [];
  if (uses.has('absorbedMm')) rows.push(set('Channelled share', parameters.channelledFraction, ''));
  if (uses.has('drainedMm') || uses.has('wasteStoreMm'))
    rows.push(set('Recession constant, c', parameters.recessionPerMonth, '1/month'));
  if (!uses.has('leakedMm') && !uses.has('headMm')) return rows;
  if (!isByDefects(step)) return [...rows, set('Leak share', parameters.leakFraction, '')];
  const { liner } = parameters;
  return [
    ...rows,
    set('Defects of the liner', liner.defectsPerHa, '1/ha'),
    set('Area of a defect', liner.defectAreaM2 * 10_000, 'cm²'),
    set('Conductivity of the soil under it', liner.soilConductivityMPerS, 'm/s'),
    set('Thickness of that soil', liner.soilThicknessM, 'm'),
    set('Length of the drain', liner.drainLengthM, 'm'),
    set('Slope of the drain, rise over run', liner.slope, ''),
    set('Conductivity of the drain', liner.drainConductivityMPerS, 'm/s'),
  ];
}

function soilStart({ terms: t }: StepForWorking): Row[] {
  const beforeMm = t.soilStoreMm - t.dSoilMm;
  const rows = [input('Soil store before', 'end of the step before', beforeMm, 'mm')];
  if (t.soilWaterBroughtMm === 0) return rows;
  return [
    ...rows,
    input('Water brought with soil', 'store of the new soil − store of the old', t.soilWaterBroughtMm, 'mm'),
    {
      ...input('Soil store to begin with', 'before + brought', soilStartMm(t), 'mm'),
      withValues: `${mm(beforeMm)} + ${mm(t.soilWaterBroughtMm)}`,
    },
  ];
}

/** The waste at the start, and how much of an even inflow stays in it: φ of the linear reservoir. */
function wasteStart(step: StepForWorking): Row[] {
  const { terms: t, dayCount, daysInMonth, parameters } = step;
  const { months, kept } = reservoirOf(step);
  const c = plain(parameters.recessionPerMonth);
  return [
    input('Deficit before', 'end of the step before + placed', t.wasteDeficitMm + t.absorbedMm, 'mm'),
    input('Waste store before', 'end of the step before', t.wasteStoreMm - t.dWasteMm, 'mm'),
    input('Length of the step, t', `${dayCount} of ${daysInMonth} days`, months, 'months'),
    {
      ...input('Share kept, φ', '(1 − exp(−c·t)) ÷ (c·t), 1 at c = 0', kept, ''),
      withValues: `(1 − exp(−${c} × ${plain(months)})) ÷ (${c} × ${plain(months)})`,
    },
    {
      ...input('Inflow to the waste', 'passed + returned + free moisture − absorbed', wasteInflow(t), 'mm'),
      withValues: `${mm(t.passedMm)} + ${mm(t.returnToWasteMm)} + ${mm(t.freeMoistureMm)} − ${mm(t.absorbedMm)}`,
    },
  ];
}

/** What the month's PET came from. */
function petStart(step: StepForWorking): Row[] {
  const { climate, parameters, pet } = step;
  const rows: Row[] = [];
  const add = (what: string, how: string, value: number | null, unit: string) => {
    if (value !== null) rows.push(input(what, how, value, unit));
  };
  const method = parameters.petMethod;
  if (method === 'thornthwaite') {
    add('Mean temperature, T', 'climate record', climate.tMeanC, '°C');
    add('Heat index of the record, I', 'sum of (T ÷ 5)^1.514 over the long-term means', step.heatIndex, '');
    add('Daylight on the 15th', 'from the latitude', step.daylightHours, 'h');
  } else if (method === 'pan') {
    add('Pan evaporation of the month', 'climate record', climate.panMm, 'mm');
    add('Pan coefficient', 'set', parameters.panCoefficient, '');
  } else if (method !== 'given') {
    add('Mean of the daily minima', 'climate record', climate.tMinC, '°C');
    add('Mean of the daily maxima', 'climate record', climate.tMaxC, '°C');
    if (method === 'penman-monteith') {
      add(
        'Wind at 2 m',
        climate.windMPerS === null ? 'set' : 'climate record',
        climate.windMPerS ?? parameters.windMPerS,
        'm/s',
      );
      add('Relative humidity', 'climate record', climate.relativeHumidityPercent, '%');
      add('Bright sunshine a day', 'climate record', climate.sunshineHours, 'h');
    }
  }
  for (const part of pet.parts) rows.push(input(part.what, part.how, part.value, part.unit));
  rows.push(
    input(
      'PET of the month',
      pet.days ? 'by the method of the parameter set, day by day' : 'by the method of the parameter set',
      pet.petMm,
      'mm',
    ),
  );
  return rows;
}

/** Giroud's leakage with the values of the step: per defect, over all defects of a hectare, over the days. */
function leakFormula({ terms: t, parameters, dayCount }: StepForWorking): string {
  const { liner } = parameters;
  const headM = t.headMm / 1000;
  const perDefect = defectLeakageM3PerS(headM, liner);
  const contact = liner.contact === 'good' ? '0.21' : '1.15';
  return (
    `min(${mm(t.drainedMm + t.condensateMm)}, ${plain(perDefect)} m³/s × ${plain(liner.defectsPerHa)}/ha × ${dayCount} d × 8640), ` +
    `${plain(perDefect)} = ${contact} × (1 + 0.1 × (${plain(headM)} ÷ ${plain(liner.soilThicknessM)})^0.95) × ${plain(liner.defectAreaM2)}^0.1 × ${plain(headM)}^0.9 × ${plain(liner.soilConductivityMPerS)}^0.74`
  );
}

/** Both published head formulas beside each other, for the impingement of the step. */
function headStart(step: StepForWorking): Row[] {
  const { terms: t, parameters, dayCount } = step;
  const impingement = (t.drainedMm + t.condensateMm) / 1000 / (dayCount * 86_400);
  return [
    input('Impingement, q', 'drained + condensate over the step', impingement, 'm/s'),
    input(
      'Largest head, Giroud et al.',
      'steady, as vertical depth',
      giroudHeadM(impingement, parameters.liner) * 1000,
      'mm',
      'Giroud, Zornberg & Zhao 2000 (from memory)',
    ),
    input(
      'Largest head, McEnroe',
      'steady, as vertical depth',
      mcEnroeHeadM(impingement, parameters.liner) * 1000,
      'mm',
      'McEnroe 1993 (from memory)',
    ),
  ];
}

/** Where a term's law comes from, by the method in force. */
function sourceOf(name: TermName, step: StepForWorking): string {
  if (name.startsWith('runoff') && hasCurveRunoff(step))
    return 'USDA-NRCS TR-55 (1986), each day; melt by share';
  const isDaily = Boolean(step.climate.days?.precipitationMm && step.climate.days.tMeanC);
  if (['rainMm', 'snowfallMm', 'meltMm'].includes(name) && step.parameters.snow.isOn && isDaily)
    return 'degree-day by days, NEH-630 ch. 11 (second-hand)';
  return termRegister[name].source;
}

/** What the terms of a working begin from. */
function startOf(uses: ReadonlySet<TermName>, step: StepForWorking): Row[] {
  const hasWaste = step.cover.kind !== 'lined-floor';
  return [
    ...(uses.has('petMm') ? petStart(step) : []),
    ...(uses.has('soilStoreMm') || uses.has('aetMm') ? soilStart(step) : []),
    ...(hasWaste && (uses.has('absorbedMm') || uses.has('wasteStoreMm')) ? wasteStart(step) : []),
    ...(uses.has('headMm') && isByDefects(step) ? headStart(step) : []),
  ];
}

/**
 * The working of one term of one plot and step: inputs, settings, formula in words and with its values, volume.
 * @returns numbered lines; the last is the volume in m³
 */
export function explainStep(term: TermName, step: StepForWorking): WorkingLine[] {
  const uses = new Set<TermName>([...(chains[term] ?? []), term]);
  if (!isByDefects(step) && term !== 'headMm') uses.delete('headMm');
  const termRow = (name: TermName): Row => ({
    what: termRegister[name].name,
    how: termRegister[name].words,
    withValues: valuesOf(name, step),
    value: step.terms[name],
    unit: 'mm',
    source: sourceOf(name, step),
  });
  const volumeM3 = (step.terms[term] * step.areaM2) / 1000;
  const rows: Row[] = [
    ...coverSettings(uses, step),
    ...parameterSettings(uses, step),
    ...startOf(uses, step),
    ...[...uses].map(termRow),
    input(
      'Area',
      `${step.dayCount} of ${step.daysInMonth} days`,
      step.areaM2 / 10_000,
      'ha',
      'cover history',
    ),
    {
      ...input('Volume', 'depth × area × 10', volumeM3, 'm³'),
      withValues: `${mm(step.terms[term])} × ${plain(step.areaM2 / 10_000)} × 10`,
    },
  ];
  return rows.map((row, index) => ({ line: index + 1, ...row }));
}
