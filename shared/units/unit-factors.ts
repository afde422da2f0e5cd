import { Decimal } from 'decimal.js';

/**
 * Every conversion factor once, exact by definition.
 * Sources: international inch, foot, acre and pound (1959 agreement); US gallon 231 in³ (NIST SP 811 appendix B);
 * imperial gallon 4.54609 L (UK Units of Measurement Regulations 1995); oil barrel 42 US gal.
 */
export const volumeUnitsM3 = {
  m3: { label: 'm³', words: 'cubic metres', factor: '1' },
  L: { label: 'L', words: 'litres', factor: '0.001' },
  kL: { label: 'kL', words: 'kilolitres', factor: '1' },
  ML: { label: 'ML', words: 'megalitres', factor: '1000' },
  'gal-us': { label: 'gal (US)', words: 'US gallons', factor: '0.003785411784' },
  'kgal-us': { label: 'kgal (US)', words: 'thousand US gallons', factor: '3.785411784' },
  'Mgal-us': { label: 'MG', words: 'million US gallons', factor: '3785.411784' },
  'gal-uk': { label: 'gal (UK)', words: 'imperial gallons', factor: '0.00454609' },
  ft3: { label: 'ft³', words: 'cubic feet', factor: '0.028316846592' },
  bbl: { label: 'bbl', words: 'barrels', factor: '0.158987294928' },
} as const;

export type VolumeUnit = keyof typeof volumeUnitsM3;
export const volumeUnits = Object.keys(volumeUnitsM3) as VolumeUnit[];

/** Length units of depth and level, in metres. */
export const lengthUnitsM = { m: '1', cm: '0.01', mm: '0.001', in: '0.0254', ft: '0.3048' } as const;
export type LengthUnit = keyof typeof lengthUnitsM;

/** Depth units of rain and evaporation, in millimetres. */
export const depthUnitsMm = {
  mm: '1',
  cm: '10',
  in: '25.4',
  'mm-tenths': '0.1',
  'in-hundredths': '0.254',
} as const;
export type DepthUnit = keyof typeof depthUnitsMm;

export const areaUnitsM2 = { m2: '1', ha: '10000', ac: '4046.8564224' } as const;
export type AreaUnit = keyof typeof areaUnitsM2;

/** Litres per hectare and day in one US gallon per acre and day. */
export const gpadInLPerHaDay = new Decimal('3.785411784').div('0.40468564224');

/** Pounds per day in one million US gallons per day at 1 mg/L: the permits' factor, and the exact one. */
export const permitLoadFactor = '8.34';
export const exactLoadFactor = new Decimal('3785411.784').div('453592.37');

/**
 * A volume in cubic metres, exact.
 * @param value number as text or decimal, in the unit
 * @throws Error when the text is not a number
 */
export const volumeToM3 = (value: Decimal.Value, unit: VolumeUnit): Decimal =>
  new Decimal(value).times(volumeUnitsM3[unit].factor);

/** Temperature in °C from °F. */
export const fahrenheitToCelsius = (value: Decimal.Value): Decimal =>
  new Decimal(value).minus(32).times(5).div(9);
