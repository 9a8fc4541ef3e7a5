import { describe, expect, it } from 'vitest';
import type { KeyValue } from '../../analysis/sheet/result.ts';
import { verdicts } from '../../analysis/verdict/verdicts.ts';

// ILAC-G8:09/2019, 4.2 (read) and JCGM 106:2012, 8.3 (from memory): acceptance limit = tolerance limit - guard band, w = U.
// Worked: limit 6.00 kN, U 0.20 kN with k = 2: accepted up to 5.80 kN (computed).
function force(value: number): KeyValue {
  const u = 0.1;
  return { quantity: 'force', value, u, unit: 'kN', dof: null, U95: 2 * u, k: 2, budget: [] };
}

function outcome(value: number, rule: 'guarded' | 'simple') {
  return verdicts([{ quantity: 'force', max: 6, unit: 'kN', rule }], [force(value)]).verdicts[0];
}

describe('guard band of one expanded uncertainty', () => {
  it.each([
    [5.79, 'pass'],
    [5.8, 'pass'],
    [5.81, 'undecided'],
    [6, 'undecided'],
    [6.19, 'undecided'],
    [6.21, 'fail'],
  ])('%f kN against 6.00 kN, U = 0.20 kN: %s', (value, expected) => {
    expect(outcome(value, 'guarded').outcome).toBe(expected);
  });

  it('without a guard band (simple acceptance) everything up to the limit passes', () => {
    expect(outcome(6, 'simple').outcome).toBe('pass');
    expect(outcome(6.01, 'simple').outcome).toBe('fail');
  });

  it('gives the distance to the tolerance limit, not to the acceptance limit', () => {
    expect(outcome(5.81, 'guarded').margin).toBeCloseTo(0.19, 12);
  });
});
