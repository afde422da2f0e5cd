import type ExcelJS from 'exceljs';
import type { Quarter, QuarterStep } from '../../features/reports/quarter.ts';
import {
  addSheet,
  addTable,
  dayDate,
  formats,
  letters,
  monthDate,
  type CellInput,
  type ColumnSpec,
} from './sheet-tools.ts';

/** Columns of the Balance sheet in order: what each holds, and how it follows from the others. */
const names = [
  'cell',
  'plot',
  'cover',
  'month',
  'from',
  'days',
  'area',
  'rain',
  'melt',
  'snowfall',
  'dSnow',
  'pet',
  'runoffShare',
  'capacity',
  'pass',
  'returned',
  'brought',
  'returnWaste',
  'free',
  'duration',
  'soilBefore',
  'deficit',
  'wasteBefore',
  'excess',
  'runoff',
  'infiltration',
  'surplus',
  'aet',
  'soilAfter',
  'percolation',
  'passed',
  'absorbed',
  'inflow',
  'wasteAfter',
  'drained',
  'condensate',
  'leakShare',
  'leaked',
  'collected',
  'toLeachate',
  'leachateMm',
  'leachateM3',
  'soilResidual',
  'wasteResidual',
] as const;
type Name = (typeof names)[number];

const columns: Record<Name, ColumnSpec> = {
  cell: { header: 'Cell', width: 8 },
  plot: { header: 'Plot', width: 20 },
  cover: { header: 'Cover', width: 24 },
  month: { header: 'Month', format: formats.month },
  from: { header: 'From', format: formats.day },
  days: { header: 'Days', width: 7 },
  area: { header: 'Area, m²', format: formats.m3 },
  rain: { header: 'Rain, mm', format: formats.mm },
  melt: { header: 'Melt, mm', format: formats.mm },
  snowfall: { header: 'Snowfall, mm', format: formats.mm },
  dSnow: { header: 'Into snow, mm', format: formats.mm },
  pet: { header: 'Potential ET, mm', format: formats.mm },
  runoffShare: { header: 'Runoff share', format: formats.share },
  capacity: { header: 'Soil store full, mm', format: formats.mm },
  pass: { header: 'Share through membrane', format: formats.share },
  returned: { header: 'Returned at surface, mm', format: formats.mm },
  brought: { header: 'Water brought with soil, mm', format: formats.mm },
  returnWaste: { header: 'Returned into waste, mm', format: formats.mm },
  free: { header: 'Free moisture, mm', format: formats.mm },
  duration: { header: 'Step, months', format: formats.share },
  soilBefore: { header: 'Soil store before, mm', format: formats.mm },
  deficit: { header: 'Deficit with placed waste, mm', format: formats.mm },
  wasteBefore: { header: 'Waste store before, mm', format: formats.mm },
  excess: { header: 'Turned away by frost or floor, mm', format: formats.mm },
  runoff: { header: 'Runoff, mm', format: formats.mm },
  infiltration: { header: 'Into the soil, mm', format: formats.mm },
  surplus: { header: 'Surplus, mm', format: formats.mm },
  aet: { header: 'Evapotranspiration, mm', format: formats.mm },
  soilAfter: { header: 'Soil store after, mm', format: formats.mm },
  percolation: { header: 'Percolation, mm', format: formats.mm },
  passed: { header: 'Through the membrane, mm', format: formats.mm },
  absorbed: { header: 'Absorbed by waste, mm', format: formats.mm },
  inflow: { header: 'Into waste, mm', format: formats.mm },
  wasteAfter: { header: 'Waste store after, mm', format: formats.mm },
  drained: { header: 'Drained, mm', format: formats.mm },
  condensate: { header: 'Condensate to the drain, mm', format: formats.mm },
  leakShare: { header: 'Share leaked', format: formats.share },
  leaked: { header: 'Leaked, mm', format: formats.mm },
  collected: { header: 'Collected, mm', format: formats.mm },
  toLeachate: { header: 'Runoff to leachate, mm', format: formats.mm },
  leachateMm: { header: 'Leachate, mm', format: formats.mm },
  leachateM3: { header: 'Leachate, m³', format: formats.m3 },
  soilResidual: { header: 'Soil line left over, mm', format: '0.0E+00' },
  wasteResidual: { header: 'Waste line left over, mm', format: '0.0E+00' },
};

export const balanceColumn = (name: Name): string => letters(names.indexOf(name) + 1);

/** Runoff at the surface, by share or by curve number: what did not enter the soil. */
const surfaceRunoffOf = ({ terms: t }: QuarterStep): number =>
  t.rainMm + t.meltMm + t.surfaceReturnMm - t.infiltrationMm;

/** Water that frozen ground or a separated floor sends away: not a soil percolation, so it is given, not computed. */
const excessOf = (step: QuarterStep): number =>
  step.terms.runoffToStormMm + step.terms.runoffToLeachateMm - surfaceRunoffOf(step);

/** A part as a share of its whole; the set share where there is nothing to share. */
const shareOf = (part: number, whole: number, set: number): number => (whole > 0 ? part / whole : set);

/** The soil formulas of the run's law; the same text in every row. */
function soilFormulas(law: Quarter['parameters']['soilLaw'], at: (name: Name) => string) {
  const [S0, D, A, I, P] = [
    `(${at('soilBefore')}+${at('brought')})`,
    at('surplus'),
    at('capacity'),
    at('infiltration'),
    at('pet'),
  ];
  const dry = {
    exponential: { aet: `${I}+${S0}*(1-EXP(${D}/${A}))`, store: `${S0}*EXP(${D}/${A})` },
    'equal-availability': { aet: `${I}+MIN(${S0},-${D})`, store: `${S0}-MIN(${S0},-${D})` },
    linear: { aet: `${I}+MIN(${S0},-${D}*${S0}/${A})`, store: `${S0}-MIN(${S0},-${D}*${S0}/${A})` },
  }[law];
  return {
    aet: `IF(${A}=0,MIN(${I},${P}),IF(${D}>=0,${P},${dry.aet}))`,
    soilAfter: `IF(${A}=0,0,IF(${D}>=0,MIN(${A},${S0}+${D}),${dry.store}))`,
    percolation: `MAX(0,IF(${A}=0,MAX(0,${D}),IF(${D}>=0,MAX(0,${S0}+${D}-${A}),0))-${at('excess')})`,
  };
}

function rowOf(
  step: QuarterStep,
  row: number,
  above: QuarterStep | undefined,
  quarter: Quarter,
): CellInput[] {
  const t = step.terms;
  const at = (name: Name) => `${balanceColumn(name)}${row}`;
  const up = (name: Name) => `${balanceColumn(name)}${row - 1}`;
  const carries = above?.plotId === step.plotId;
  const live = (formula: string, result: number): CellInput => ({ formula, result });
  const { recessionPerMonth: c, channelledFraction } = quarter.parameters;
  const soilBefore = t.soilStoreMm - t.dSoilMm;
  const wasteBefore = t.wasteStoreMm - t.dWasteMm;
  const arriving = t.passedMm + t.returnToWasteMm;
  const inflow = arriving + t.freeMoistureMm - t.absorbedMm;
  const soil = soilFormulas(quarter.parameters.soilLaw, at);
  const hasWaste = step.cover.kind !== 'lined-floor';
  const decay = `EXP(-Recession_per_month*${at('duration')})`;
  const kept = c === 0 ? '1' : `((1-${decay})/(Recession_per_month*${at('duration')}))`;
  const isToLeachate = step.cover.runoffDestination === 'leachate';
  const duration =
    step.dayCount /
    new Date(Date.UTC(Number(step.month.slice(0, 4)), Number(step.month.slice(5)), 0)).getUTCDate();
  const values: Record<Name, CellInput> = {
    cell: step.cellCode,
    plot: step.plotName,
    cover: step.coverName,
    month: monthDate(step.month),
    from: dayDate(step.fromOn),
    days: step.dayCount,
    area: step.areaM2,
    rain: t.rainMm,
    melt: t.meltMm,
    snowfall: t.snowfallMm,
    dSnow: t.dSnowMm,
    pet: t.petMm,
    runoffShare: shareOf(surfaceRunoffOf(step), t.rainMm + t.meltMm, step.runoffCoefficient),
    capacity: step.cover.availableWaterMm,
    pass: shareOf(t.passedMm, t.percolationMm, step.cover.membranePassFraction ?? 1),
    returned: t.surfaceReturnMm,
    brought: t.soilWaterBroughtMm,
    returnWaste: t.returnToWasteMm,
    free: t.freeMoistureMm,
    duration,
    excess: excessOf(step),
    soilBefore: carries ? live(up('soilAfter'), soilBefore) : soilBefore,
    deficit: t.wasteDeficitMm + t.absorbedMm,
    wasteBefore: carries ? live(up('wasteAfter'), wasteBefore) : wasteBefore,
    runoff: live(
      `${at('runoffShare')}*(${at('rain')}+${at('melt')})+${at('excess')}`,
      t.runoffToStormMm + t.runoffToLeachateMm,
    ),
    infiltration: live(
      `${at('rain')}+${at('melt')}-${at('runoffShare')}*(${at('rain')}+${at('melt')})+${at('returned')}`,
      t.infiltrationMm,
    ),
    surplus: live(`${at('infiltration')}-${at('pet')}`, t.infiltrationMm - t.petMm),
    aet: live(soil.aet, t.aetMm),
    soilAfter: live(soil.soilAfter, t.soilStoreMm),
    percolation: live(soil.percolation, t.percolationMm),
    passed: live(`${at('percolation')}*${at('pass')}`, t.passedMm),
    absorbed: live(
      `MIN(${at('deficit')},(${at('passed')}+${at('returnWaste')})*(1-Channelled_share))`,
      Math.min(t.wasteDeficitMm + t.absorbedMm, arriving * (1 - channelledFraction)),
    ),
    inflow: live(`${at('passed')}+${at('returnWaste')}+${at('free')}-${at('absorbed')}`, inflow),
    wasteAfter: hasWaste
      ? live(`${at('wasteBefore')}*${decay}+${at('inflow')}*${kept}`, t.wasteStoreMm)
      : live(at('wasteBefore'), t.wasteStoreMm),
    drained: hasWaste
      ? live(`${at('inflow')}*(1-${kept})+${at('wasteBefore')}*(1-${decay})`, t.drainedMm)
      : live(at('inflow'), t.drainedMm),
    condensate: t.condensateMm,
    leakShare:
      quarter.parameters.leakMethod === 'fraction'
        ? live('Leak_share', quarter.parameters.leakFraction)
        : shareOf(t.leakedMm, t.drainedMm + t.condensateMm, 0),
    leaked: live(`(${at('drained')}+${at('condensate')})*${at('leakShare')}`, t.leakedMm),
    collected: live(`(${at('drained')}+${at('condensate')})*(1-${at('leakShare')})`, t.collectedMm),
    toLeachate: isToLeachate ? live(at('runoff'), t.runoffToLeachateMm) : 0,
    leachateMm: live(`${at('collected')}+${at('toLeachate')}`, t.leachateMm),
    leachateM3: live(`${at('leachateMm')}*${at('area')}/1000`, (t.leachateMm * step.areaM2) / 1000),
    soilResidual: live(
      `${at('rain')}+${at('melt')}+${at('returned')}+${at('brought')}-${at('runoff')}-${at('aet')}-(${at('soilAfter')}-${at('soilBefore')})-${at('percolation')}`,
      0,
    ),
    wasteResidual: live(
      `${at('passed')}+${at('returnWaste')}+${at('free')}-${at('absorbed')}-(${at('wasteAfter')}-${at('wasteBefore')})-${at('drained')}`,
      0,
    ),
  };
  return names.map((name) => values[name]);
}

const inputNames: readonly Name[] = [
  'rain',
  'melt',
  'snowfall',
  'dSnow',
  'pet',
  'runoffShare',
  'capacity',
  'pass',
  'returned',
  'brought',
  'returnWaste',
  'free',
  'deficit',
  'excess',
  'condensate',
];
export const balanceFirstRow = 4;

/** One row per plot and step; stores carried from the row above of the same plot; every term a formula. */
export function addBalanceSheet(
  workbook: ExcelJS.Workbook,
  quarter: Quarter,
  title: string,
): { lastRow: number } {
  const sheet = addSheet(
    workbook,
    'Balance',
    `${title}: water balance by plot and step`,
    quarter.site.paperSize,
    true,
  );
  sheet.getCell('A2').value =
    'Weather, cover properties and the first store of each plot are given; everything else follows by formula.';
  const rows = quarter.steps.map((step, index) =>
    rowOf(step, balanceFirstRow + index, quarter.steps[index - 1], quarter),
  );
  addTable(
    sheet,
    balanceFirstRow - 1,
    names.map((name) => columns[name]),
    rows,
    { inputColumns: inputNames.map((name) => names.indexOf(name)) },
  );
  return { lastRow: balanceFirstRow + rows.length - 1 };
}
