import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { predict } from '../../analysis/track/predict.ts';

describe('predict', () => {
  it('continues a motion with constant acceleration exactly, forwards and backwards, over gaps', () => {
    const number = fc.double({ min: -20, max: 20, noNaN: true });
    fc.assert(
      fc.property(number, number, number, fc.boolean(), (a, b, c, backwards) => {
        const frames = backwards ? [50, 49, 47, 46, 45] : [40, 42, 43, 44, 45];
        const at = (n: number) => a + b * (n - 45) + c * (n - 45) ** 2;
        const next = backwards ? 43 : 47;
        const p = predict(frames, frames.map(at), next);
        expect(p.value).toBeCloseTo(at(next), 6);
        expect(p.rate).toBeCloseTo(b + 2 * c * (next - 45), 6);
      }),
    );
  });

  it('stays where the body is when it was seen once', () => {
    expect(predict([7], [3.5], 8)).toEqual({ value: 3.5, rate: 0 });
  });
});
