import { expect, it } from 'vitest';
import { withGaps } from '../../renderer/lanes/gaps.ts';

it('withGaps \u203a leaves a whole curve as it is', () => {
  expect(withGaps([0, 1, 2], [5, 6, 7])).toEqual([
    { x: 0, y: 5 },
    { x: 1, y: 6 },
    { x: 2, y: 7 },
  ]);
});

it('withGaps \u203a puts a point without a value where a frame is missing', () => {
  expect(withGaps([0, 1, 2, 4, 5], [1, 1, 1, 1, 1])).toEqual([
    { x: 0, y: 1 },
    { x: 1, y: 1 },
    { x: 2, y: 1 },
    { x: 3, y: Number.NaN },
    { x: 4, y: 1 },
    { x: 5, y: 1 },
  ]);
});
