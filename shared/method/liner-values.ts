import { defectLeakageM3PerS, giroudThicknessM, mcEnroeHeadM } from '../water-balance/liner-leakage.ts';
import { yearsToFirstLeachate } from '../water-balance/waste-store.ts';
import type { PublishedCase } from './published-cases.ts';
import type { ComputedValue } from './published-values.ts';

const valueOf = (
  one: PublishedCase,
  what: string,
  unit: string,
  printed: number,
  computed: number,
  tolerance: number,
): ComputedValue => ({
  id: `${one.id} ${what}`,
  title: one.title,
  what,
  unit,
  source: `${one.source}, ${one.source_locator}`,
  isFromMemory: true,
  printed,
  computed,
  tolerance,
});

interface LeakSet {
  c_qo: number;
  h_m: number;
  t_m: number;
  k_m_per_s: number;
  a_m2: number;
}

const leakValues = (one: PublishedCase): ComputedValue[] =>
  (one.inputs['sets'] as LeakSet[]).map((set, index) =>
    valueOf(
      one,
      `Leakage, set ${index + 1}, 10⁻⁹`,
      'm³/s',
      Number(((one.expected['q_m3_per_s'] as number[])[index]! * 1e9).toPrecision(6)),
      defectLeakageM3PerS(set.h_m, {
        contact: set.c_qo < 1 ? 'good' : 'poor',
        soilThicknessM: set.t_m,
        soilConductivityMPerS: set.k_m_per_s,
        defectAreaM2: set.a_m2,
      }) * 1e9,
      0.001,
    ),
  );

interface HeadSet {
  L_m: number;
  tan_slope: number;
  k_m_per_s: number;
  q_m_per_s: number;
}

const headValues = (one: PublishedCase): ComputedValue[] =>
  (one.inputs['sets'] as HeadSet[]).flatMap((set, index) => {
    const drain = { drainLengthM: set.L_m, slope: set.tan_slope, drainConductivityMPerS: set.k_m_per_s };
    const answer = (one.expected['sets'] as { mcenroe_y_m: number; giroud_t_m: number }[])[index]!;
    const [mcEnroeM, giroudM] = [mcEnroeHeadM(set.q_m_per_s, drain), giroudThicknessM(set.q_m_per_s, drain)];
    return [
      valueOf(one, `Head, McEnroe, set ${index + 1}`, 'm', answer.mcenroe_y_m, mcEnroeM, 0.0002),
      valueOf(one, `Thickness, Giroud, set ${index + 1}`, 'm', answer.giroud_t_m, giroudM, 0.0002),
    ];
  });

function firstLeachateValue(one: PublishedCase): ComputedValue {
  const of = (name: string) => Number(one.inputs[name]);
  const layer = (name: 'soil' | 'waste') => ({
    depthM: of(`${name}_depth_m`),
    fieldCapacityFraction: of(`${name}_field_capacity_mm_per_m`) / 1000,
    moistureFraction: 0,
  });
  const percolationMm = of('p_mm') * (1 - of('runoff_coefficient')) - of('aet_mm');
  return valueOf(
    one,
    'Years to first leachate, dry waste',
    'years',
    Number(one.expected['total_years']),
    yearsToFirstLeachate([layer('soil'), layer('waste')], percolationMm),
    0.1,
  );
}

/** Liner and waste formulas. Most figures were computed from the formulas elsewhere, not printed by their authors. */
export function computeLinerValues(cases: readonly PublishedCase[]): ComputedValue[] {
  const find = (id: string) => {
    const found = cases.find((one) => one.id === id);
    if (!found) throw new RangeError(`The case ${id} is missing.`);
    return found;
  };
  return [
    ...leakValues(find('giroud1997-computed')),
    ...headValues(find('head-on-liner-computed')),
    firstLeachateValue(find('vesilind-southern-ohio')),
  ];
}
