import { Decimal } from 'decimal.js';

export interface ConcentrationUnit {
  /** Kind of quantity; units of one kind convert into each other. */
  kind: 'mass-concentration' | 'ph' | 'conductivity' | 'temperature' | 'count';
  standard: string;
  factor: string;
  /** What a nitrogen or phosphorus species is expressed as, when the unit says so: N, NH4, NO3, CaCO3. */
  basis: string | null;
}

const massUnits: Record<string, string> = {
  'mg/l': '1',
  ppm: '1',
  'ug/l': '0.001',
  ppb: '0.001',
  'ng/l': '0.000001',
  'g/l': '1000',
  'mg/m3': '0.001',
  'g/m3': '1',
};

/** One writing for every micro sign, including the one a wrong decoding leaves. */
const tidyMicro = (text: string) => text.replace(/Âµ|µ|μ/g, 'u');

/**
 * Reads a unit as laboratories write it; null for one that is not known. Never a default.
 * @example readUnit('µg/L') // { standard: 'mg/L', factor: '0.001', … }
 */
export function readUnit(text: string): ConcentrationUnit | null {
  const tidy = tidyMicro(text)
    .toLowerCase()
    .replace(/[\s\u00a0]+/g, ' ')
    .trim();
  const [, head = '', basis = null] = /^(.*?)(?: as ([a-z0-9]+))?$/.exec(tidy) ?? [];
  const unit = head.replace(/[()]/g, '').trim();
  const named =
    basis &&
    (
      { n: 'N', nh4: 'NH4', nh3: 'NH3', no3: 'NO3', p: 'P', po4: 'PO4', caco3: 'CaCO3' } as Record<
        string,
        string
      >
    )[basis];
  if (unit in massUnits)
    return { kind: 'mass-concentration', standard: 'mg/L', factor: massUnits[unit]!, basis: named ?? null };
  if (/^(ph( units?)?|s\.?u\.?|std units?|standard units?|-)$/.test(unit))
    return { kind: 'ph', standard: 'pH', factor: '1', basis: null };
  if (unit === 'us/cm' || unit === 'umho/cm' || unit === 'umhos/cm')
    return { kind: 'conductivity', standard: 'µS/cm', factor: '1', basis: null };
  if (unit === 'ms/cm') return { kind: 'conductivity', standard: 'µS/cm', factor: '1000', basis: null };
  if (/^(cfu|mpn)\/100 ?ml$/.test(unit))
    return { kind: 'count', standard: `${unit.slice(0, 3).toUpperCase()}/100 mL`, factor: '1', basis: null };
  return null;
}

/** Molar masses, g/mol: IUPAC abridged standard atomic weights (N 14.007, H 1.008, O 15.999, P 30.974). */
const basisToElement: Record<string, Record<string, string>> = {
  N: {
    N: '1',
    NH4: new Decimal('14.007').div('18.039').toString(),
    NH3: new Decimal('14.007').div('17.031').toString(),
    NO3: new Decimal('14.007').div('62.004').toString(),
  },
  P: { P: '1', PO4: new Decimal('30.974').div('94.970').toString() },
};

/** Factor from a reported basis to the analyte's own; null when they cannot be joined. @example basisFactor('NH4', 'N') // 14.007/18.039 */
export function basisFactor(reported: string | null, wanted: string | null): string | null {
  if (reported === null || reported === wanted) return '1';
  if (wanted === null) return null;
  return basisToElement[wanted]?.[reported] ?? null;
}
