/** A drained composite liner, or the membrane of a cover with its drain. */
export interface DefectLeakage {
  defectsPerHa: number;
  defectAreaM2: number;
  contact: 'good' | 'poor';
  /** Low-permeability soil under the membrane. */
  soilThicknessM: number;
  soilConductivityMPerS: number;
  /** Drain over the membrane: horizontal length to the pipe, slope as rise over run, conductivity. */
  drainLengthM: number;
  slope: number;
  drainConductivityMPerS: number;
}

/** Above this conductivity of the soil under it the defect formula does not hold, m/s. From memory. */
export const soilConductivityMaxMPerS = 1e-6;

/**
 * Leakage through one circular defect of a composite liner, m³/s.
 * Q = C [1 + 0.1 (h/t)^0.95] a^0.1 h^0.9 k^0.74; C 0.21 in good contact, 1.15 in poor. SI only.
 * @param headM head of liquid on the membrane, m
 * @source Giroud 1997, Geosynthetics International 4(3-4):335-348 (from memory)
 */
export function defectLeakageM3PerS(
  headM: number,
  liner: Pick<DefectLeakage, 'contact' | 'soilThicknessM' | 'defectAreaM2' | 'soilConductivityMPerS'>,
): number {
  if (headM <= 0) return 0;
  const contact = liner.contact === 'good' ? 0.21 : 1.15;
  return (
    contact *
    (1 + 0.1 * (headM / liner.soilThicknessM) ** 0.95) *
    liner.defectAreaM2 ** 0.1 *
    headM ** 0.9 *
    liner.soilConductivityMPerS ** 0.74
  );
}

interface Drain {
  drainLengthM: number;
  slope: number;
  drainConductivityMPerS: number;
}

/**
 * Largest depth of liquid on a sloping drain under steady impingement, as vertical depth, m.
 * λ = q/(k tan²β); j = 1 − 0.12 exp(−[log10((8λ/5)^(5/8))]²); t = j (√(1+4λ) − 1)/2 · (tan β/cos β) · L, over cos β.
 * @param impingementMPerS q, m/s
 * @source Giroud, Zornberg & Zhao 2000, Geosynthetics International 7(4-6); Giroud et al. 1992 (from memory)
 */
export function giroudHeadM(impingementMPerS: number, drain: Drain): number {
  return giroudThicknessM(impingementMPerS, drain) * Math.sqrt(1 + drain.slope * drain.slope);
}

/** The same as thickness normal to the slope, m: how the formula is printed. Source: as giroudHeadM. */
export function giroudThicknessM(impingementMPerS: number, drain: Drain): number {
  if (impingementMPerS <= 0) return 0;
  const { slope, drainLengthM, drainConductivityMPerS } = drain;
  const lambda = impingementMPerS / (drainConductivityMPerS * slope * slope);
  const logarithm = Math.log10(((8 * lambda) / 5) ** (5 / 8));
  const shape = 1 - 0.12 * Math.exp(-logarithm * logarithm);
  const rise = slope * Math.sqrt(1 + slope * slope);
  // (√(1+4λ) − 1)/2 without the loss of digits at small λ.
  return ((shape * 2 * lambda) / (Math.sqrt(1 + 4 * lambda) + 1)) * rise * drainLengthM;
}

/**
 * Largest vertical depth on a sloping drain, m: the second published formula, beside Giroud's.
 * @source McEnroe 1993, J. Environ. Eng. 119(2):262-270 (from memory)
 */
export function mcEnroeHeadM(impingementMPerS: number, drain: Drain): number {
  if (impingementMPerS <= 0) return 0;
  const { slope: s, drainLengthM, drainConductivityMPerS } = drain;
  const sineSquared = (s * s) / (1 + s * s);
  const r = impingementMPerS / (drainConductivityMPerS * sineSquared);
  const f = Math.sqrt(r - r * s + r * r * s * s);
  const root = 1 - 4 * r;
  let depth: number;
  // Near R = 1/4 both outer branches tend to the middle one and lose their digits.
  if (Math.abs(root) < 1e-9) {
    depth =
      ((r * (1 - 2 * r * s)) / (1 - 2 * r)) * Math.exp((2 * r * (s - 1)) / ((1 - 2 * r * s) * (1 - 2 * r)));
  } else if (root > 0) {
    const a = Math.sqrt(root);
    depth =
      f *
      (((1 - a - 2 * r) * (1 + a - 2 * r * s)) / ((1 + a - 2 * r) * (1 - a - 2 * r * s))) ** (1 / (2 * a));
  } else {
    const b = Math.sqrt(-root);
    depth = f * Math.exp(Math.atan((2 * r * s - 1) / b) / b - Math.atan((2 * r - 1) / b) / b);
  }
  return depth * s * drainLengthM;
}

const secondsPerDay = 86_400;
const m2PerHa = 10_000;

/**
 * Water that leaves through defects over a step, mm over the plot; never more than what is there.
 * @param arrivingMm water that reaches the membrane in the step @param headM measured head, or null for the computed one
 * @returns what leaks, what stays above, and the head it rests on; the computed head is the steady maximum, an upper
 * estimate
 */
export function leakThroughDefects(
  arrivingMm: number,
  dayCount: number,
  liner: DefectLeakage,
  headM: number | null,
): { leakedMm: number; keptMm: number; headM: number } {
  const seconds = dayCount * secondsPerDay;
  const standing = headM ?? giroudHeadM(arrivingMm / 1000 / seconds, liner);
  const possibleMm = ((defectLeakageM3PerS(standing, liner) * liner.defectsPerHa) / m2PerHa) * seconds * 1000;
  return {
    leakedMm: Math.min(arrivingMm, possibleMm),
    keptMm: Math.max(0, arrivingMm - possibleMm),
    headM: standing,
  };
}
