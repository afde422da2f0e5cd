import type { EngineCover } from './engine-input.ts';
import type { StepTerms, TermName } from './terms.ts';
import { termRegister } from './terms.ts';

/** One numbered line of a working: what, how, value, where from. */
export interface WorkingLine {
  line: number;
  what: string;
  how: string;
  value: number;
  unit: string;
  source: string | null;
}

interface StepForWorking {
  terms: StepTerms;
  areaM2: number;
  dayCount: number;
  daysInMonth: number;
  cover: EngineCover;
  runoffCoefficient: number;
  recessionPerMonth: number;
  channelledFraction: number;
  leakFraction: number;
  /** What the month's PET rests on, where the method needs it. */
  pet: { tMeanC: number | null; heatIndex: number | null; daylightHours: number };
}

/** The chain of terms that a term rests on, in the order they are computed. */
const chains: Partial<Record<TermName, TermName[]>> = {
  precipitationMm: ['rainMm', 'snowfallMm'],
  runoffToStormMm: ['rainMm', 'meltMm'],
  runoffToLeachateMm: ['rainMm', 'meltMm'],
  aetMm: ['rainMm', 'meltMm', 'infiltrationMm', 'petMm'],
  dSoilMm: ['rainMm', 'meltMm', 'infiltrationMm', 'petMm', 'soilStoreMm'],
  percolationMm: ['rainMm', 'meltMm', 'infiltrationMm', 'petMm', 'soilStoreMm'],
  coverDrainMm: ['percolationMm'],
  absorbedMm: ['percolationMm', 'passedMm', 'returnToWasteMm'],
  dWasteMm: ['passedMm', 'returnToWasteMm', 'freeMoistureMm', 'absorbedMm', 'wasteStoreMm'],
  drainedMm: ['passedMm', 'returnToWasteMm', 'freeMoistureMm', 'absorbedMm'],
  leakedMm: ['passedMm', 'returnToWasteMm', 'freeMoistureMm', 'absorbedMm', 'drainedMm'],
  collectedMm: ['passedMm', 'returnToWasteMm', 'freeMoistureMm', 'absorbedMm', 'drainedMm'],
  leachateMm: [
    'percolationMm',
    'passedMm',
    'returnToWasteMm',
    'freeMoistureMm',
    'absorbedMm',
    'drainedMm',
    'collectedMm',
    'runoffToLeachateMm',
  ],
};

function settingsOf(term: TermName, step: StepForWorking): Omit<WorkingLine, 'line'>[] {
  const { cover } = step;
  const setting = (what: string, value: number, unit: string, source: string) => ({
    what,
    how: 'set',
    value,
    unit,
    source,
  });
  const uses = new Set([term, ...(chains[term] ?? [])]);
  const rows: Omit<WorkingLine, 'line'>[] = [];
  if (uses.has('infiltrationMm') || term.startsWith('runoff'))
    rows.push(setting('Runoff share', step.runoffCoefficient, '', `cover ${cover.name}`));
  if (uses.has('petMm'))
    rows.push(setting('Cover factor on PET', cover.petFactor, '', `cover ${cover.name}`));
  if (uses.has('soilStoreMm') || term === 'aetMm')
    rows.push(setting('Soil store, full', cover.availableWaterMm, 'mm', `cover ${cover.name}`));
  if ((uses.has('passedMm') || term === 'coverDrainMm') && cover.membranePassFraction !== null)
    rows.push(setting('Share through the membrane', cover.membranePassFraction, '', `cover ${cover.name}`));
  if (uses.has('absorbedMm'))
    rows.push(setting('Channelled share', step.channelledFraction, '', 'parameter set'));
  if (uses.has('drainedMm'))
    rows.push(setting('Recession constant', step.recessionPerMonth, '1/month', 'parameter set'));
  if (uses.has('leakedMm') || uses.has('collectedMm'))
    rows.push(setting('Leak share', step.leakFraction, '', 'parameter set'));
  return rows;
}

type Row = Omit<WorkingLine, 'line'>;

const given = (what: string, how: string, value: number, unit: string): Row => ({
  what,
  how,
  value,
  unit,
  source: null,
});

/** The soil at the start: as the step before left it, and with the soil placed on this day. */
function soilStart({ terms }: StepForWorking): Row[] {
  const beforeMm = terms.soilStoreMm - terms.dSoilMm;
  const rows = [given('Soil store before', 'end of the step before', beforeMm, 'mm')];
  if (terms.soilWaterBroughtMm !== 0)
    rows.push(
      given(
        'Water brought with soil',
        'store of the new soil − store of the old',
        terms.soilWaterBroughtMm,
        'mm',
      ),
      given('Soil store to begin with', 'before + brought', beforeMm + terms.soilWaterBroughtMm, 'mm'),
    );
  return rows;
}

/** The waste at the start, and how much of an even inflow stays in it: φ of the linear reservoir. */
function wasteStart({ terms, recessionPerMonth, dayCount, daysInMonth }: StepForWorking): Row[] {
  const months = dayCount / daysInMonth;
  const exponent = recessionPerMonth * months;
  return [
    given('Deficit before', 'end of the step before + placed', terms.wasteDeficitMm + terms.absorbedMm, 'mm'),
    given('Waste store before', 'end of the step before', terms.wasteStoreMm - terms.dWasteMm, 'mm'),
    given('Length of the step, t', `${dayCount} of ${daysInMonth} days`, months, 'months'),
    given(
      'Share kept, φ',
      '(1 − exp(−c·t)) ÷ (c·t)',
      exponent === 0 ? 1 : -Math.expm1(-exponent) / exponent,
      '',
    ),
    given(
      'Inflow to the waste',
      'passed + returned + free moisture − absorbed',
      terms.passedMm + terms.returnToWasteMm + terms.freeMoistureMm - terms.absorbedMm,
      'mm',
    ),
  ];
}

/** What the month's PET came from. */
function petStart({ terms, cover, dayCount, daysInMonth, pet }: StepForWorking): Row[] {
  const rows: Row[] = [];
  if (pet.tMeanC !== null) rows.push(given('Mean temperature', 'climate record', pet.tMeanC, '°C'));
  if (pet.heatIndex !== null) {
    rows.push(
      given(
        'Heat index of the record, I',
        'sum of (T ÷ 5)^1.514 over the long-term means',
        pet.heatIndex,
        '',
      ),
    );
    rows.push(given('Daylight on the 15th', 'from the latitude', pet.daylightHours, 'h'));
  }
  if (cover.petFactor > 0)
    rows.push(
      given(
        'PET of the month',
        'by the method of the parameter set',
        (terms.petMm / cover.petFactor) * (daysInMonth / dayCount),
        'mm',
      ),
    );
  return rows;
}

/** What the terms of a working begin from. */
function startOf(term: TermName, step: StepForWorking): Row[] {
  const chain = new Set<TermName>([term, ...(chains[term] ?? [])]);
  return [
    ...(chain.has('petMm') ? petStart(step) : []),
    ...(chain.has('soilStoreMm') || term === 'aetMm' ? soilStart(step) : []),
    ...(chain.has('absorbedMm') || chain.has('wasteStoreMm') ? wasteStart(step) : []),
  ];
}

/**
 * The working of one term of one plot and step: inputs, settings, formula in words, volume.
 * @returns numbered lines; the last is the volume in m³
 */
export function explainStep(term: TermName, step: StepForWorking): WorkingLine[] {
  const termRow = (name: TermName): Omit<WorkingLine, 'line'> => ({
    what: termRegister[name].name,
    how: termRegister[name].words,
    value: step.terms[name],
    unit: 'mm',
    source: termRegister[name].source,
  });
  const rows = [
    ...settingsOf(term, step),
    ...startOf(term, step),
    ...(chains[term] ?? []).map(termRow),
    termRow(term),
    {
      what: 'Area',
      how: `${step.dayCount} of ${step.daysInMonth} days`,
      value: step.areaM2 / 10_000,
      unit: 'ha',
      source: 'cover history',
    },
    {
      what: 'Volume',
      how: 'depth × area × 10',
      value: (step.terms[term] * step.areaM2) / 1000,
      unit: 'm³',
      source: null,
    },
  ];
  return rows.map((row, index) => ({ line: index + 1, ...row }));
}
