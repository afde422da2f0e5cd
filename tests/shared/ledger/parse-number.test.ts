import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseNumber } from '#shared/ledger/parse-number.ts';

describe('a number as people type it (bad-input table of the acceptance scenarios)', () => {
  it('a letter O is refused by name', () => {
    expect(parseNumber('O184298', { decimals: 0 })).toEqual({
      kind: 'wrong',
      reason: '"O" is not part of a number. It looks like the letter O where a zero belongs.',
    });
  });

  it('184,298 and 184 298 are accepted on a register of whole units, 184.298 asks', () => {
    expect(parseNumber('184,298', { decimals: 0 })).toMatchObject({ kind: 'number', value: '184298' });
    expect(parseNumber('184 298', { decimals: 0 })).toMatchObject({ kind: 'number', value: '184298' });
    expect(parseNumber('184.298', { decimals: 0 })).toMatchObject({
      kind: 'ask',
      readings: ['184298', '184.298'],
    });
  });

  it('2,10 is shown back as 2.10, never 210', () => {
    expect(parseNumber('2,10', { decimals: 3 })).toEqual({
      kind: 'ask',
      readings: ['2.10'],
      question: 'Is this 2.10?',
    });
  });

  it('a unit typed after the number is accepted, a real minus sign too', () => {
    expect(parseNumber('12.5 m³', { decimals: 1, unit: 'm³' })).toMatchObject({
      kind: 'number',
      value: '12.5',
    });
    expect(parseNumber('−3', { decimals: 0 })).toMatchObject({ kind: 'number', value: '-3' });
  });

  it.each(['', '  ', '1e5', '--3', '1.2.3', 'NaN', 'Infinity', '٣', '1,23,456'])(
    '%j is not a number',
    (text) => {
      expect(parseNumber(text, { decimals: 0 }).kind).toBe('wrong');
    },
  );

  it('plain digits come back as themselves, exactly', () => {
    fc.assert(
      fc.property(fc.bigInt({ min: 0n, max: 10n ** 20n }), (value) => {
        expect(parseNumber(String(value), { decimals: 0 })).toEqual({
          kind: 'number',
          value: String(value),
          isChanged: false,
        });
      }),
    );
  });

  it('no text makes it fail', () => {
    fc.assert(
      fc.property(fc.string(), fc.integer({ min: 0, max: 4 }), (text, decimals) =>
        ['number', 'ask', 'wrong'].includes(parseNumber(text, { decimals }).kind),
      ),
    );
  });
});
