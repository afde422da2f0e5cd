import { describe, expect, it } from 'vitest';
import { analyteTemplates } from '#shared/lab/analyte-templates.ts';
import { hasCasCheckDigit, readCas } from '#shared/lab/read-cas.ts';

// Check digits by hand: 7440-66-6 is 6×1 + 6×2 + 0×3 + 4×4 + 4×5 + 7×6 = 96, last digit 6.
describe('CAS registry numbers', () => {
  it.each(['7440-66-6', '7664-41-7', '75-09-2', '75-01-4', '79-01-6', '7732-18-5'])(
    '%s passes its check digit, and no other last digit does',
    (cas) => {
      const others = '0123456789'.replace(cas.at(-1)!, '');
      expect(hasCasCheckDigit(cas)).toBe(true);
      expect([...others].filter((digit) => hasCasCheckDigit(cas.slice(0, -1) + digit))).toEqual([]);
    },
  );

  it('every template carries a number that passes', () => {
    const numbers = analyteTemplates.flatMap((one) => one.cas ?? []);
    expect(numbers.filter((cas) => !hasCasCheckDigit(cas))).toEqual([]);
  });

  // The damage and the numbers under it as listed with shape 8 of the project's lab sheets.
  it.each([
    ['1975-09-02', '75-09-2', 'date'],
    ['2-Sep-75', '75-09-2', 'date'],
    ['4-Jan-75', '75-01-4', 'date'],
    ['1979-01-06', '79-01-6', 'date'],
    ['7664417', '7664-41-7', 'check digit'],
    ['007440-66-6', '7440-66-6', 'padding'],
  ])('"%s" is %s, and says so', (text, cas, word) => {
    expect(readCas(text)?.cas).toBe(cas);
    expect(readCas(text)?.howRead).toContain(word);
  });

  it('takes a printed number as it is, and nothing whose check digit does not fit', () => {
    expect(readCas('7440-66-6')).toEqual({ cas: '7440-66-6', howRead: null });
    expect(['7440-66-5', '1975-09-03', '7664418', 'n/a', '2026-03-04'].map(readCas)).toEqual(
      Array.from({ length: 5 }, () => null),
    );
  });
});
