import {
  curveNumberRunoffMm,
  dryCurveNumber,
  retentionMm,
  wetCurveNumber,
} from '../water-balance/curve-number.ts';
import { hargreavesMmPerDay } from '../water-balance/hargreaves.ts';
import {
  atmosphericPressureKPa,
  clearSkyRadiation,
  monthlySoilHeatFlux,
  monthlySoilHeatFluxSoFar,
  netLongwaveRadiation,
  penmanMonteith,
  pressureSlope,
  psychrometricConstant,
  saturationPressureKPa,
  solarRadiationFromSunshine,
  windAt2m,
} from '../water-balance/penman-monteith.ts';
import { computeDailySnow } from '../water-balance/snow.ts';
import { daylightHours, declinationRad, extraterrestrialRadiation } from '../water-balance/solar-geometry.ts';
import { reservoirStep } from '../water-balance/waste-store.ts';

interface SingleCase {
  id: string;
  title: string;
  source: string;
  locator: string;
  read_or_memory: string;
  inputs: Record<string, { value: unknown; unit: string }>;
  expected: Record<string, { value: number; unit: string; tol: number }>;
}

export interface ComputedValue {
  id: string;
  title: string;
  what: string;
  unit: string;
  source: string;
  isFromMemory: boolean;
  printed: number;
  computed: number;
  tolerance: number;
}

/** A number of a case by name: an input, or a printed intermediate that a later formula starts from. */
type Pick = (name: string) => number;
type Row = [key: string, what: string, compute: (pick: Pick) => number];

const mmPerInch = 25.4;
const defaults = { windMPerS: 2, radiationCoefficient: 0.16 };

const sunshineOf = (pick: Pick) =>
  solarRadiationFromSunshine(
    extraterrestrialRadiation(pick('latitude'), pick('J')),
    pick('n'),
    daylightHours(pick('latitude'), declinationRad(pick('J'))),
  );

const penman = (pick: Pick, change: Partial<Parameters<typeof penmanMonteith>[0]>) =>
  penmanMonteith({
    latitudeDeg: pick('latitude'),
    elevationM: pick('z'),
    dayOfYear: pick('J'),
    tMinC: pick('Tmin'),
    tMaxC: pick('Tmax'),
    vapourPressureKPa: null,
    windMPerS: null,
    sunshineHours: null,
    soilHeatFlux: 0,
    defaults,
    ...change,
  });

const bangkok = (pick: Pick) =>
  penman(pick, {
    vapourPressureKPa: pick('ea'),
    windMPerS: pick('u2'),
    sunshineHours: pick('n'),
    soilHeatFlux: monthlySoilHeatFluxSoFar(pick('T_prev_month'), pick('T_month')),
  });
const uccle = (pick: Pick) =>
  penman(pick, {
    vapourPressureKPa: pick('ea'),
    windMPerS: windAt2m(pick('wind_10m') / 3.6, 10),
    sunshineHours: pick('n'),
  });
const lyon = (windMPerS: number) => (pick: Pick) => penman(pick, { windMPerS }).mmPerDay;

const meanSaturation = (pick: Pick) =>
  (saturationPressureKPa(pick('Tmax')) + saturationPressureKPa(pick('Tmin'))) / 2;

const table = (xs: readonly number[], what: string, compute: (x: number) => number, digits = 0): Row[] =>
  xs.map((x) => [x.toFixed(digits), `${what} ${x}`, () => compute(x)]);

const curveRows: Row[] = [70, 75, 80, 85, 90].flatMap((one): Row[] => [
  [`CN_I_${one}`, `Curve number ${one} on dry ground`, () => dryCurveNumber(one)],
  [`CN_III_${one}`, `Curve number ${one} on wet ground`, () => wetCurveNumber(one)],
]);

/** Pack and water of five days at 2.74 mm/°C·d, from 30 mm. */
const packDays = { rain: [10, 5, 0, 8, 0], warmth: [-3, 0, 2, 4, 6] };
const packAfter = (days: number) =>
  computeDailySnow(30, packDays.rain.slice(0, days), packDays.warmth.slice(0, days), 2.74);

const rows: Record<string, Row[]> = {
  'fao56-ex02': [
    ['P', 'Atmospheric pressure', (pick) => atmosphericPressureKPa(pick('z'))],
    ['gamma', 'Psychrometric constant', (pick) => psychrometricConstant(pick('z'))],
  ],
  'fao56-ex03': [
    ['e0_Tmax', 'Saturation pressure at the maximum', (pick) => saturationPressureKPa(pick('Tmax'))],
    ['e0_Tmin', 'Saturation pressure at the minimum', (pick) => saturationPressureKPa(pick('Tmin'))],
    ['es', 'Mean saturation pressure', meanSaturation],
  ],
  'fao56-ex05': [
    [
      'ea_eq19',
      'Vapour pressure from mean humidity',
      (pick) => ((pick('RHmax') + pick('RHmin')) / 200) * meanSaturation(pick),
    ],
  ],
  'fao56-ex08': [
    ['Ra', 'Extraterrestrial radiation', (pick) => extraterrestrialRadiation(pick('latitude'), pick('J'))],
    ['delta', 'Solar declination', (pick) => declinationRad(pick('J'))],
  ],
  'fao56-ex09': [['N', 'Daylight', (pick) => daylightHours(pick('latitude'), declinationRad(pick('J')))]],
  'fao56-ex10': [
    [
      'Rs',
      'Solar radiation from sunshine',
      (pick) => {
        const daylight = daylightHours(pick('latitude'), declinationRad(pick('J')));
        const radiation = extraterrestrialRadiation(pick('latitude'), pick('J'));
        return solarRadiationFromSunshine(radiation, pick('sunshine_month') / pick('days'), daylight);
      },
    ],
  ],
  'fao56-ex11': [
    [
      'Rnl',
      'Net longwave radiation',
      (pick) =>
        netLongwaveRadiation({
          tMinC: pick('Tmin'),
          tMaxC: pick('Tmax'),
          vapourPressureKPa: pick('ea'),
          solarRadiation: pick('Rs'),
          clearSky: pick('Rso'),
        }),
    ],
  ],
  'fao56-ex13': [
    ['G', 'Soil heat flux of a month', (pick) => monthlySoilHeatFlux(pick('T_prev'), pick('T_next'))],
  ],
  'fao56-ex17': [
    ['Rs', 'Solar radiation', sunshineOf],
    ['Rso', 'Clear-sky radiation', (pick) => bangkok(pick).clearSky],
    ['Rnl', 'Net longwave radiation', (pick) => bangkok(pick).netLongwave],
    ['Rn', 'Net radiation', (pick) => bangkok(pick).netRadiation],
    ['G', 'Soil heat flux', (pick) => monthlySoilHeatFluxSoFar(pick('T_prev_month'), pick('T_month'))],
    ['ETo_radiation', 'Radiation part', (pick) => bangkok(pick).radiationPartMm],
    ['ETo_aero', 'Aerodynamic part', (pick) => bangkok(pick).aerodynamicPartMm],
    ['ETo', 'Penman–Monteith, monthly', (pick) => bangkok(pick).mmPerDay],
  ],
  'fao56-ex18': [
    ['u2', 'Wind at 2 m', (pick) => windAt2m(pick('wind_10m') / 3.6, 10)],
    ['Rs', 'Solar radiation', sunshineOf],
    [
      'Rso',
      'Clear-sky radiation',
      (pick) => clearSkyRadiation(uccle(pick).clearSky / (0.75 + 2e-5 * pick('z')), pick('z')),
    ],
    ['Rnl', 'Net longwave radiation', (pick) => uccle(pick).netLongwave],
    ['Rn', 'Net radiation', (pick) => uccle(pick).netRadiation],
    ['ETo', 'Penman–Monteith, daily', (pick) => uccle(pick).mmPerDay],
  ],
  'fao56-ex20-pm': [
    ['Rs', 'Solar radiation from the range', (pick) => penman(pick, {}).solarRadiation],
    ['Rn', 'Net radiation', (pick) => penman(pick, {}).netRadiation],
    ['ETo_u2', 'Penman–Monteith, temperatures only, 2 m/s', lyon(2)],
    ['ETo_u1', 'the same at 1 m/s', lyon(1)],
    ['ETo_u3', 'the same at 3 m/s', lyon(3)],
  ],
  'fao56-ex20-hargreaves': [
    [
      'ETo',
      'Reference evapotranspiration by Hargreaves',
      (pick) =>
        hargreavesMmPerDay({
          tMinC: pick('Tmin'),
          tMaxC: pick('Tmax'),
          radiationMjPerM2Day: extraterrestrialRadiation(pick('latitude'), pick('J')),
        }),
    ],
  ],
  'fao56-ex21-pan': [['ETo', 'Pan × coefficient', (pick) => pick('Epan_mean') * pick('Kp')]],
  'fao56-table-2-1': table([0, 500, 1000, 2000, 4000], 'Pressure at height, m:', atmosphericPressureKPa),
  'fao56-table-2-2': table([0, 1000, 2000, 4000], 'Psychrometric constant at, m:', psychrometricConstant),
  'fao56-table-2-3': table([1, 10, 20, 30, 40], 'Saturation pressure at, °C:', saturationPressureKPa, 1),
  'fao56-table-2-4': table([1, 10, 20, 30, 40], 'Slope of the pressure at, °C:', pressureSlope, 1),
  'tr55-table-4-1-ia': [
    ['Ia_CN70', 'Initial abstraction, curve number 70', () => (0.2 * retentionMm(70)) / mmPerInch],
    ['Ia_CN91', 'Initial abstraction, curve number 91', () => (0.2 * retentionMm(91)) / mmPerInch],
  ],
  'neh630-ch10-p5-1-cn75': [
    ['Q_mm', 'Runoff of 5.1 inches', (pick) => curveNumberRunoffMm(pick('P') * mmPerInch, pick('CN'))],
  ],
  'cn-amc-chow': curveRows,
  'degree-day-pack': [
    ...[1, 2, 3, 4, 5].map((day): Row => [
      `SWE_${day}`,
      `Pack after day ${day}`,
      () => packAfter(day).packMm,
    ]),
    ...[3, 4, 5].map((day): Row => [
      `water_${day}`,
      `Rain and melt of day ${day}`,
      () => packAfter(day).days!.meltMm[day - 1]! + packAfter(day).days!.rainMm[day - 1]!,
    ]),
  ],
  'linear-reservoir-recession': [1, 2, 4].map((months): Row => [
    `S_${months}`,
    `Reservoir of 100 mm after ${months} months`,
    (pick) => reservoirStep(pick('S0'), 0, 1 / pick('k'), months).storeMm,
  ]),
};

/** Single published values of the formulas, each beside what is computed here. */
export function computePublishedValues(cases: readonly SingleCase[]): ComputedValue[] {
  return Object.entries(rows).flatMap(([id, own]) =>
    own.map(([key, what, compute]) => {
      const found = cases.find((one) => one.id === id);
      const expected = found?.expected[key];
      if (!found || !expected) throw new RangeError(`The published value ${id} ${key} is missing.`);
      return {
        id: `${id} ${key}`,
        title: found.title,
        what,
        unit: expected.unit,
        // A case constructed by us stands on no page.
        source: found.locator === '-' ? found.source : `${found.source}, ${found.locator}`,
        isFromMemory: found.read_or_memory.startsWith('memory'),
        printed: expected.value,
        tolerance: expected.tol,
        computed: compute((name) => Number(found.inputs[name]?.value ?? found.expected[name]?.value)),
      };
    }),
  );
}
