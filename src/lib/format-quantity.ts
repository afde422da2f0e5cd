import { monthName } from '#shared/calendar/month.ts';

const thin = '\u2009';
const minus = '\u2212';

/** A number for display: digits in threes by a thin space, a real minus sign, fixed decimals. Rounds only here. */
export function formatNumber(value: number, decimals = 0): string {
  const rounded = Math.abs(value).toFixed(decimals);
  const [whole = '0', part] = rounded.split('.');
  const grouped = whole.length > 3 ? whole.replace(/\B(?=(\d{3})+$)/g, thin) : whole;
  const isZero = Number(rounded) === 0;
  return `${value < 0 && !isZero ? minus : ''}${grouped}${part === undefined ? '' : `.${part}`}`;
}

/** With its sign always, for differences; a zero has none. */
export function formatSigned(value: number, decimals = 0): string {
  const text = formatNumber(value, decimals);
  return value > 0 && Number(Math.abs(value).toFixed(decimals)) !== 0 ? `+${text}` : text;
}

export const formatPercent = (value: number): string => `${formatSigned(value, 1)}\u00a0%`;
/** Very small or very large numbers, as a power of ten. */
export const formatExponent = (value: number, decimals = 1): string =>
  value.toExponential(decimals).replaceAll('-', '−');
export const formatMm = (value: number): string => formatNumber(value, 1);
export const formatM3 = (value: number): string => formatNumber(value, 0);
export const formatHa = (areaM2: number): string => formatNumber(areaM2 / 10_000, 1);

const usGallonsPerM3 = 1 / 0.003785411784;

/** Volume in the site's unit set, with decimals that fit it. */
export function formatVolume(valueM3: number, units: 'metric' | 'us', decimals = 0): string {
  return units === 'us' ? formatNumber(valueM3 * usGallonsPerM3, 0) : formatNumber(valueM3, decimals);
}
export const volumeUnit = (units: 'metric' | 'us'): string => (units === 'us' ? 'gal (US)' : 'm³');

/** An instant on the reader's clock, with its zone. */
export const formatInstant = (iso: string): string =>
  new Intl.DateTimeFormat('en-GB', {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    timeZoneName: 'short',
  }).format(new Date(iso));

/** A wall-clock text 'YYYY-MM-DDTHH:MM' as a reader says it. */
export const formatLocal = (local: string): string =>
  local.length > 10
    ? `${Number(local.slice(8, 10))} ${monthName(local.slice(0, 7)).slice(0, 3)} ${local.slice(11, 16)}`
    : `${Number(local.slice(8, 10))} ${monthName(local.slice(0, 7)).slice(0, 3)}`;

/** Result of a laboratory: below detection stays below; digits as printed. */
export function formatResult(result: {
  comparator: string;
  value: string | null;
  missingReason?: string | null;
  printedDecimals?: number | null;
}): string {
  if (result.value === null) return result.missingReason ?? 'no value';
  const number = Number(result.value);
  const text =
    result.printedDecimals === null || result.printedDecimals === undefined
      ? String(number)
      : number.toFixed(Math.max(result.printedDecimals, (String(number).split('.')[1] ?? '').length));
  const prefix =
    result.comparator === '<'
      ? 'below '
      : result.comparator === '>'
        ? 'above '
        : result.comparator === '~'
          ? 'about '
          : '';
  return prefix + text;
}
