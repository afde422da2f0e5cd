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
  drainedMm: ['passedMm', 'returnToWasteMm', 'freeMoistureMm', 'absorbedMm', 'wasteStoreMm'],
  leakedMm: ['drainedMm'],
  collectedMm: ['passedMm', 'absorbedMm', 'drainedMm'],
  leachateMm: ['passedMm', 'absorbedMm', 'drainedMm', 'collectedMm', 'runoffToLeachateMm'],
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

/** Store at the start of the step, for the terms that begin from one. */
function startOf(term: TermName, { terms }: StepForWorking): Omit<WorkingLine, 'line'>[] {
  const chain = [term, ...(chains[term] ?? [])];
  const rows: Omit<WorkingLine, 'line'>[] = [];
  if (chain.includes('soilStoreMm') || term === 'aetMm') {
    rows.push({
      what: 'Soil store before',
      how: 'end of the step before',
      value: terms.soilStoreMm - terms.dSoilMm + terms.soilWaterBroughtMm,
      unit: 'mm',
      source: null,
    });
  }
  if (chain.includes('wasteStoreMm'))
    rows.push({
      what: 'Waste store before',
      how: 'end of the step before',
      value: terms.wasteStoreMm - terms.dWasteMm,
      unit: 'mm',
      source: null,
    });
  return rows;
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
