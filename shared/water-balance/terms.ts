/** Every term of one plot and step, mm over the plot (method section 1). */
export interface StepTerms {
  precipitationMm: number;
  rainMm: number;
  snowfallMm: number;
  meltMm: number;
  dSnowMm: number;
  petMm: number;
  surfaceReturnMm: number;
  soilWaterBroughtMm: number;
  runoffToStormMm: number;
  runoffToLeachateMm: number;
  infiltrationMm: number;
  aetMm: number;
  dSoilMm: number;
  soilStoreMm: number;
  percolationMm: number;
  passedMm: number;
  coverDrainMm: number;
  returnToWasteMm: number;
  freeMoistureMm: number;
  absorbedMm: number;
  dWasteMm: number;
  wasteStoreMm: number;
  wasteDeficitMm: number;
  drainedMm: number;
  condensateMm: number;
  collectedMm: number;
  leakedMm: number;
  /** Head on the liner that the leakage rests on, mm: measured, else the computed maximum. */
  headMm: number;
  /** Collected + runoff to leachate: what is expected at the sump. */
  leachateMm: number;
}

export type TermName = keyof StepTerms;

/** What a term is called, where it comes from and which way it counts; feeds tables, workings and the workbook. */
export const termRegister: Record<TermName, { name: string; words: string; source: string }> = {
  precipitationMm: { name: 'Precipitation', words: 'rain + snowfall', source: 'climate record' },
  rainMm: { name: 'Rain', words: 'precipitation × share falling as rain', source: 'McCabe & Markstrom 2007' },
  snowfallMm: {
    name: 'Snowfall',
    words: 'precipitation × share falling as snow',
    source: 'McCabe & Markstrom 2007',
  },
  meltMm: {
    name: 'Snow melt',
    words: 'pack × largest melt share × warmth',
    source: 'McCabe & Markstrom 2007',
  },
  dSnowMm: { name: 'Into snow', words: 'pack after − pack before', source: 'Method, Rain and snow' },
  petMm: {
    name: 'Potential ET',
    words: 'PET of the month × cover factor × share of days',
    source: 'Method, Potential evapotranspiration',
  },
  surfaceReturnMm: {
    name: 'Returned at the surface',
    words: 'volume ÷ area of the plots named',
    source: 'ledger',
  },
  soilWaterBroughtMm: {
    name: 'Water brought with soil',
    words: 'store of the new soil − store of the old',
    source: 'Method, What is balanced',
  },
  runoffToStormMm: {
    name: 'Runoff to storm water',
    words: 'runoff share × (rain + melt)',
    source: 'Fenn et al. 1975, Table 3',
  },
  runoffToLeachateMm: {
    name: 'Runoff to leachate',
    words: 'runoff share × (rain + melt), contact water',
    source: 'Method, Runoff',
  },
  infiltrationMm: {
    name: 'Into the soil',
    words: 'rain + melt + returned − runoff',
    source: 'Method, Runoff',
  },
  aetMm: {
    name: 'Evapotranspiration',
    words: 'PET while the soil gains; what enters + what the soil gives while it dries',
    source: 'Thornthwaite & Mather 1957',
  },
  dSoilMm: {
    name: 'Into soil',
    words: 'store at the end − end of the step before',
    source: 'Method, Soil of the cover',
  },
  soilStoreMm: {
    name: 'Soil store at the end',
    words: 'min(capacity, before + surplus), or before × exp(shortfall ÷ capacity)',
    source: 'Thornthwaite & Mather 1957',
  },
  percolationMm: {
    name: 'Percolation',
    words: 'max(0, before + surplus − capacity)',
    source: 'Thornthwaite & Mather 1957',
  },
  passedMm: {
    name: 'Through the membrane',
    words: 'percolation × entered share, or through defects by the head (all of it without a membrane)',
    source: 'Method, Through a membrane',
  },
  coverDrainMm: {
    name: 'Cover drain',
    words: 'percolation × (1 − entered share)',
    source: 'Method, Through a membrane',
  },
  returnToWasteMm: {
    name: 'Returned into waste',
    words: 'volume ÷ area of the plots named',
    source: 'ledger',
  },
  freeMoistureMm: {
    name: 'Free moisture of placed waste',
    words: 'placed waste wetter than field capacity',
    source: 'Method, Waste',
  },
  absorbedMm: {
    name: 'Absorbed by waste',
    words: 'min(deficit, inflow × (1 − channelled share))',
    source: 'Method, Waste',
  },
  dWasteMm: { name: 'Into waste', words: 'waste store after − before', source: 'Method, Waste' },
  wasteStoreMm: {
    name: 'Waste store at the end',
    words: 'before × exp(−c·t) + inflow × φ',
    source: 'Method, Waste',
  },
  wasteDeficitMm: {
    name: 'Deficit to field capacity',
    words: 'before + placed − absorbed',
    source: 'Method, Waste',
  },
  drainedMm: {
    name: 'Drained',
    words: 'inflow × (1 − φ) + before × (1 − exp(−c·t))',
    source: 'Method, Waste',
  },
  collectedMm: {
    name: 'Collected',
    words: '(drained + condensate) × (1 − leak share)',
    source: 'Method, Liner',
  },
  leakedMm: {
    name: 'Leaked',
    words: '(drained + condensate) × leak share, or through defects by the head',
    source: 'Giroud 1997 (from memory)',
  },
  condensateMm: {
    name: 'Condensate to the drain',
    words: 'volume ÷ area of the cell',
    source: 'ledger',
  },
  headMm: {
    name: 'Head on the liner',
    words: 'measured mean of the month, else the largest depth by Giroud et al.',
    source: 'Giroud et al. 2000 (from memory)',
  },
  leachateMm: {
    name: 'Leachate at the sump',
    words: 'collected + runoff to leachate',
    source: 'Method, What is balanced',
  },
};

export const termNames = Object.keys(termRegister) as TermName[];

/** Terms that are amounts at an instant, not flows of a step: they are not added over time. */
export const stateTerms: ReadonlySet<TermName> = new Set([
  'soilStoreMm',
  'wasteStoreMm',
  'wasteDeficitMm',
  'headMm',
]);

/** Every term at zero: what a step writes into. */
export const zeroTerms = (): StepTerms =>
  Object.fromEntries(termNames.map((name) => [name, 0])) as unknown as StepTerms;

/** Stored terms; a term that an earlier engine did not have is zero. */
export const asTerms = (stored: unknown): StepTerms => ({ ...zeroTerms(), ...(stored as StepTerms) });
