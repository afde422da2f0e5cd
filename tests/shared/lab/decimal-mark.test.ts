import { describe, expect, it } from 'vitest';
import { decimalMarkOf, isEitherWay, withPoint } from '#shared/lab/decimal-mark.ts';

// Expected values follow the notation itself: 651,5 can only be a decimal comma, 8.043,0 groups by points.
describe('the decimal mark of a column', () => {
  it('is decided by texts that read one way only', () => {
    expect(decimalMarkOf(['651,5', '1,385', '8.043,0', '6,250'])).toBe('comma');
    expect(decimalMarkOf(['< 0,05', '1.400'])).toBe('comma');
    expect(decimalMarkOf(['651.5', '1,385'])).toBe('point');
    expect(decimalMarkOf(['1,234.5', '1,385'])).toBe('point');
  });

  it('is not decided by texts that read both ways, nor by a contradiction', () => {
    expect(decimalMarkOf(['1,385', '6,250', '12'])).toBeNull();
    expect(decimalMarkOf(['651,5', '651.5'])).toBeNull();
  });

  it('turns every number of a text to a point', () => {
    expect(withPoint('1,385', 'comma')).toBe('1.385');
    expect(withPoint('8.043,0', 'comma')).toBe('8043.0');
    expect(withPoint('1.400', 'comma')).toBe('1400');
    expect(withPoint('< 0,05 J', 'comma')).toBe('< 0.05 J');
    expect(withPoint('1,385', 'point')).toBe('1385');
    expect(withPoint('1,234.5', 'point')).toBe('1234.5');
  });

  it('knows which numbers could be read two ways', () => {
    expect(isEitherWay('1,250')).toBe(true);
    expect(isEitherWay('1.400')).toBe(true);
    expect(isEitherWay('0,250')).toBe(false);
    expect(isEitherWay('12,5')).toBe(false);
  });
});
