/** What a typed number turned out to be. */
export type ParsedNumber =
  | { kind: 'number'; value: string; isChanged: boolean }
  | { kind: 'ask'; readings: string[]; question: string }
  | { kind: 'wrong'; reason: string };

const spaces = /[\s\u00a0\u2009\u202f]/g;

/**
 * Reads a number as people type it: grouping spaces, either decimal mark, a trailing unit, a real minus sign.
 * Ambiguous text is asked about, never guessed; nothing that is not a number passes.
 * @param text as typed
 * @param options.decimals decimals the instrument shows; 0 for a register of whole units
 * @returns value as plain decimal text, or a question, or the reason why not
 */
export function parseNumber(
  text: string,
  { decimals, unit }: { decimals: number; unit?: string },
): ParsedNumber {
  let tidy = text.trim().replace(/[\u2212\u2013]/g, '-');
  if (unit && tidy.toLowerCase().endsWith(unit.toLowerCase())) tidy = tidy.slice(0, -unit.length).trim();
  tidy = tidy.replace(spaces, '');
  if (tidy === '') return { kind: 'wrong', reason: 'Enter a number.' };
  const odd = [...tidy].find((character) => !/[0-9.,+-]/.test(character));
  if (odd) {
    const hint = /[oO]/.test(odd) ? ' It looks like the letter O where a zero belongs.' : '';
    return { kind: 'wrong', reason: `"${odd}" is not part of a number.${hint}` };
  }
  if (!/^[+-]?[0-9.,]*[0-9][0-9.,]*$/.test(tidy))
    return { kind: 'wrong', reason: 'This is not a number. Enter it like 48216.4.' };
  const sign = tidy.startsWith('-') ? '-' : '';
  const body = tidy.replace(/^[+-]/, '');
  const marks = body.replace(/[0-9]/g, '');
  const isChanged = body !== text.trim();
  const done = (value: string): ParsedNumber => ({
    kind: 'number',
    value: sign + (value.replace(/^0+(?=\d)/, '') || '0'),
    isChanged,
  });

  if (marks === '') return done(body);
  const kinds = new Set(marks);
  if (kinds.size === 2) {
    const decimalMark = body.lastIndexOf(',') > body.lastIndexOf('.') ? ',' : '.';
    const groupMark = decimalMark === ',' ? '.' : ',';
    const plain = body.replaceAll(groupMark, '').replace(decimalMark, '.');
    return marks.endsWith(decimalMark) && marks.indexOf(decimalMark) === marks.length - 1
      ? done(plain)
      : { kind: 'wrong', reason: 'The comma and the point do not form a number. Enter it like 48216.4.' };
  }
  const mark = marks[0]!;
  const groups = body.split(mark);
  const isGrouped =
    groups[0]!.length >= 1 && groups[0]!.length <= 3 && groups.slice(1).every((group) => group.length === 3);
  if (marks.length > 1) {
    return isGrouped
      ? done(groups.join(''))
      : { kind: 'wrong', reason: 'This is not a number. Enter it like 48216.4.' };
  }
  const asGrouped = groups.join('');
  const asDecimal = `${groups[0] || '0'}.${groups[1] ?? ''}`.replace(/\.$/, '');
  if (mark === ',' && isGrouped && decimals === 0) return done(asGrouped);
  if (isGrouped && groups[0] !== '0') {
    return {
      kind: 'ask',
      readings: [asGrouped, asDecimal].map((value) => sign + value),
      question: `Is this ${asGrouped} or ${asDecimal}?`,
    };
  }
  if (mark === ',') return { kind: 'ask', readings: [sign + asDecimal], question: `Is this ${asDecimal}?` };
  return done(asDecimal);
}
