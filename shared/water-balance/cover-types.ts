/** The eight states of the ground (method section 1). */
export const coverKinds = [
  'lined-floor',
  'working-area',
  'daily-cover',
  'intermediate-soil',
  'intermediate-membrane',
  'final-soil',
  'final-membrane',
  'evapotranspiration-cover',
] as const;
export type CoverKind = (typeof coverKinds)[number];

export const coverKindNames: Record<CoverKind, string> = {
  'lined-floor': 'lined floor without waste',
  'working-area': 'working area (open)',
  'daily-cover': 'daily cover',
  'intermediate-soil': 'intermediate soil',
  'intermediate-membrane': 'intermediate geomembrane',
  'final-soil': 'final soil',
  'final-membrane': 'final geomembrane',
  'evapotranspiration-cover': 'evapotranspiration cover',
};

export interface CoverTypeTemplate {
  kind: CoverKind;
  availableWaterMm: number;
  membranePassFraction: number | null;
  runoffCoefficientWet: number;
  runoffCoefficientDry: number;
  runoffDestination: 'storm-water' | 'leachate';
  petFactor: number;
  source: string;
}

const runoffSource = 'runoff: Fenn, Hanley & DeGeare 1975, US EPA/530/SW-168, Table 3 (from memory)';
const soilSource = 'available water: Thornthwaite & Mather 1957, Table 10; Fenn et al. 1975, Table 2';

/**
 * Values a new site starts with. Every one is a template until an engineer of the site confirms it.
 * @assumed stores of working area and daily cover, membrane pass fraction 0.01, PET factors: our choice, common practice, no source
 */
export const coverTypeTemplates: readonly CoverTypeTemplate[] = [
  {
    kind: 'lined-floor',
    availableWaterMm: 0,
    membranePassFraction: null,
    runoffCoefficientWet: 0,
    runoffCoefficientDry: 0,
    runoffDestination: 'leachate',
    petFactor: 0.6,
    source: 'no soil store, all water to the sump: method section 4; factor our choice',
  },
  {
    kind: 'working-area',
    availableWaterMm: 60,
    membranePassFraction: null,
    runoffCoefficientWet: 0.06,
    runoffCoefficientDry: 0.05,
    runoffDestination: 'leachate',
    petFactor: 0.85,
    source: `store of the top waste: our choice; ${runoffSource}`,
  },
  {
    kind: 'daily-cover',
    availableWaterMm: 40,
    membranePassFraction: null,
    runoffCoefficientWet: 0.1,
    runoffCoefficientDry: 0.08,
    runoffDestination: 'storm-water',
    petFactor: 0.85,
    source: `0.2 m of silt loam, 200 mm/m; ${soilSource}; ${runoffSource}`,
  },
  {
    kind: 'intermediate-soil',
    availableWaterMm: 110,
    membranePassFraction: null,
    runoffCoefficientWet: 0.2,
    runoffCoefficientDry: 0.18,
    runoffDestination: 'storm-water',
    petFactor: 1,
    source: `0.55 m of silt loam, 200 mm/m; ${soilSource}; ${runoffSource}`,
  },
  {
    kind: 'intermediate-membrane',
    availableWaterMm: 0,
    membranePassFraction: 0.02,
    runoffCoefficientWet: 0.85,
    runoffCoefficientDry: 0.85,
    runoffDestination: 'storm-water',
    petFactor: 0.3,
    source: 'exposed sheet; share passing is entered, our choice',
  },
  {
    kind: 'final-soil',
    availableWaterMm: 150,
    membranePassFraction: null,
    runoffCoefficientWet: 0.17,
    runoffCoefficientDry: 0.13,
    runoffDestination: 'storm-water',
    petFactor: 1,
    source: `0.6 m of clay loam, 250 mm/m; ${soilSource}; ${runoffSource}`,
  },
  {
    kind: 'final-membrane',
    availableWaterMm: 150,
    membranePassFraction: 0.01,
    runoffCoefficientWet: 0.17,
    runoffCoefficientDry: 0.13,
    runoffDestination: 'storm-water',
    petFactor: 1,
    source: `soil over a drained geomembrane; share passing is entered, our choice; ${soilSource}; ${runoffSource}`,
  },
  {
    kind: 'evapotranspiration-cover',
    availableWaterMm: 300,
    membranePassFraction: null,
    runoffCoefficientWet: 0.1,
    runoffCoefficientDry: 0.08,
    runoffDestination: 'storm-water',
    petFactor: 1,
    source: `1.2 m of clay loam, 250 mm/m; ${soilSource}; ${runoffSource}`,
  },
];

/**
 * Share of rain and melt that runs off, by soil, slope and season (dry to wet).
 * @source Fenn, Hanley & DeGeare 1975, US EPA/530/SW-168, Table 3, after Chow and Salvato (from memory)
 */
export const runoffShareTable = {
  slopes: ['to 2 %', '2 to 7 %', 'above 7 %'],
  rows: [
    { soil: 'sandy', shares: ['0.05–0.10', '0.10–0.15', '0.15–0.20'] },
    { soil: 'heavy', shares: ['0.13–0.17', '0.18–0.22', '0.25–0.35'] },
  ],
} as const;
