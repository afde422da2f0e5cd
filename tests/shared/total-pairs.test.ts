import { describe, expect, it } from 'vitest';
import { totalPairs } from '#shared/reconciliation/total-pairs.ts';

describe('totals of predicted and measured', () => {
  it('adds what is there and gives the gap when every pair is whole', () => {
    const total = totalPairs([
      { predictedM3: 10, measuredM3: 12 },
      { predictedM3: 5, measuredM3: 4 },
    ]);
    expect(total).toEqual({ predictedM3: 15, measuredM3: 16, differenceM3: 1 });
  });

  it('keeps a zero apart from nothing read', () => {
    expect(totalPairs([{ predictedM3: 10, measuredM3: 0 }]).differenceM3).toBe(-10);
    expect(totalPairs([{ predictedM3: 10, measuredM3: null }])).toEqual({
      predictedM3: 10,
      measuredM3: null,
      differenceM3: null,
    });
  });

  it('gives no gap where one side of one pair is not there', () => {
    const total = totalPairs([
      { predictedM3: 10, measuredM3: 12 },
      { predictedM3: null, measuredM3: 4 },
    ]);
    expect(total).toEqual({ predictedM3: 10, measuredM3: 16, differenceM3: null });
  });
});
