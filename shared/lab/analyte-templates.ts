export interface AnalyteTemplate {
  code: string;
  name: string;
  cas: string | null;
  basis: string | null;
  defaultFraction: string | null;
  standardUnit: string;
  aliases: string[];
}

const one = (
  code: string,
  name: string,
  cas: string | null,
  standardUnit: string,
  aliases: string[],
  extra: Partial<AnalyteTemplate> = {},
): AnalyteTemplate => ({
  code,
  name,
  cas,
  basis: null,
  defaultFraction: null,
  standardUnit,
  aliases,
  ...extra,
});

/**
 * Parameters a new organisation starts with; more are added by hand.
 * CAS registry numbers pass their check digit; blank for summary parameters, which have none.
 */
export const analyteTemplates: readonly AnalyteTemplate[] = [
  one('ph', 'pH', null, 'pH', ['pH value']),
  one('conductivity', 'Conductivity', null, 'µS/cm', [
    'EC',
    'electrical conductivity',
    'specific conductance',
  ]),
  one('bod5', 'BOD5', null, 'mg/L', ['BOD', 'BOD-5', 'biochemical oxygen demand']),
  one('cod', 'COD', null, 'mg/L', ['chemical oxygen demand', 'CSB']),
  one('tss', 'TSS', null, 'mg/L', ['total suspended solids', 'suspended solids']),
  one(
    'ammonia',
    'Ammonia',
    '7664-41-7',
    'mg/L',
    ['ammonia nitrogen', 'ammonia-N', 'NH3-N', 'NH4-N', 'ammonium', 'ammonium-N'],
    { basis: 'N' },
  ),
  one('nitrate', 'Nitrate', '14797-55-8', 'mg/L', ['nitrate-N', 'NO3-N'], { basis: 'N' }),
  one('phosphorus', 'Phosphorus', '7723-14-0', 'mg/L', ['total P', 'phosphorus total'], {
    basis: 'P',
    defaultFraction: 'total',
  }),
  one('chloride', 'Chloride', '16887-00-6', 'mg/L', ['chlorid', 'Cl']),
  one('sulfate', 'Sulfate', '14808-79-8', 'mg/L', ['sulphate', 'SO4']),
  one('zinc', 'Zinc', '7440-66-6', 'mg/L', ['Zn', 'zink', 'zink gesamt'], { defaultFraction: 'total' }),
  one('iron', 'Iron', '7439-89-6', 'mg/L', ['Fe', 'eisen'], { defaultFraction: 'total' }),
  one('arsenic', 'Arsenic', '7440-38-2', 'mg/L', ['As', 'arsen'], { defaultFraction: 'total' }),
  one('phenol', 'Phenol', '108-95-2', 'mg/L', []),
  one('benzoic-acid', 'Benzoic acid', '65-85-0', 'mg/L', []),
  one('p-cresol', 'p-Cresol', '106-44-5', 'mg/L', ['4-methylphenol']),
  one('terpineol', 'α-Terpineol', '98-55-5', 'mg/L', ['a-terpineol', 'alpha-terpineol']),
  one('benzene', 'Benzene', '71-43-2', 'mg/L', ['benzol']),
  one('dichloromethane', 'Dichloromethane', '75-09-2', 'mg/L', ['methylene chloride', 'dichlormethan']),
  one('vinyl-chloride', 'Vinyl chloride', '75-01-4', 'mg/L', ['chloroethene', 'vinylchlorid']),
  one('trichloroethene', 'Trichloroethene', '79-01-6', 'mg/L', ['trichloroethylene', 'TCE', 'trichlorethen']),
  one('aox', 'AOX', null, 'mg/L', ['adsorbable organic halogens', 'adsorbable organically bound halogens']),
  one('phenol-index', 'Phenol index', null, 'mg/L', ['phenolindex']),
  one('toluene', 'Toluene', '108-88-3', 'mg/L', ['toluol']),
];
