/** The mark that divides whole from part in the texts of a column. */
export type DecimalMark = 'comma' | 'point';

const numbers = /\d[\d.,]*\d/g;
const commaDivides = [
  /^\d+,(\d{1,2}|\d{4,})$/,
  /^0,\d+$/,
  /^\d{1,3}(\.\d{3})+,\d+$/,
  /^\d{1,3}(\.\d{3}){2,}$/,
];
const pointDivides = [
  /^\d+\.(\d{1,2}|\d{4,})$/,
  /^0\.\d+$/,
  /^\d{1,3}(,\d{3})+\.\d+$/,
  /^\d{1,3}(,\d{3}){2,}$/,
];

/**
 * Decides the decimal mark from texts that can be read in one way only, like "651,5" or "8.043,0".
 * @param texts results or limits of one column, number cells left out
 * @returns null when nothing decides, or when the texts contradict each other
 * @source rules common to all sheets, 11
 */
export function decimalMarkOf(texts: readonly string[]): DecimalMark | null {
  const all = texts.flatMap((text) => text.match(numbers) ?? []);
  const isComma = all.some((one) => commaDivides.some((pattern) => pattern.test(one)));
  const isPoint = all.some((one) => pointDivides.some((pattern) => pattern.test(one)));
  if (isComma === isPoint) return null;
  return isComma ? 'comma' : 'point';
}

/** Writes the numbers of a text with a point and without grouping, by the mark of its column. */
export const withPoint = (text: string, mark: DecimalMark): string =>
  text.replace(numbers, (number) =>
    mark === 'comma'
      ? number.replace(/\.(?=\d{3}(?!\d))/g, '').replace(',', '.')
      : number.replace(/,(?=\d{3}(?!\d))/g, ''),
  );

/** Whether a number of the text could be read in two ways: "1,250", "1.400". */
export const isEitherWay = (text: string): boolean =>
  (text.match(numbers) ?? []).some((number) => /^[1-9]\d{0,2}[.,]\d{3}$/.test(number));
