import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { KeyValue, Verdict } from '../../analysis/sheet/result.ts';
import type { SheetLimit } from '../../analysis/sheet/sheet.ts';
import { decisionRules } from '../../analysis/verdict/decisionRules.ts';
import { verdicts } from '../../analysis/verdict/verdicts.ts';

const k = 2;

function peak(value: number, U95: number): KeyValue {
  return {
    quantity: 'tip.peakAcceleration',
    value,
    u: U95 / k,
    unit: 'm/s2',
    dof: null,
    U95,
    k,
    budget: [{ source: 'positions', u: U95 / k }],
  };
}

function limit(rest: Partial<SheetLimit>): SheetLimit {
  return { quantity: 'tip.peakAcceleration', unit: 'm/s2', rule: 'guarded', ...rest };
}

function outcomeOf(rest: Partial<SheetLimit>, value: number, U95: number): Verdict {
  const { verdicts: decided, findings } = verdicts([limit(rest)], [peak(value, U95)]);
  expect(findings).toEqual([]);
  expect(decided).toHaveLength(1);
  return decided[0];
}

const rank = { pass: 0, undecided: 1, fail: 2 } as const;
const finite = fc.double({ min: -1e6, max: 1e6, noNaN: true });
const expanded = fc.double({ min: 0, max: 1e5, noNaN: true });
const rule = fc.constantFrom(...(Object.keys(decisionRules) as SheetLimit['rule'][]));

describe('verdicts', () => {
  it.each([
    // value and U95 against a limit of at most 900: the guard band is one U95 wide on either side
    [880, 10, 'pass', 'pass'],
    [890, 10, 'pass', 'pass'],
    [891, 10, 'undecided', 'pass'],
    [900, 10, 'undecided', 'pass'],
    [909, 10, 'undecided', 'fail'],
    [911, 10, 'fail', 'fail'],
    [899, 0, 'pass', 'pass'],
    [901, 0, 'fail', 'fail'],
  ])('%f ± %f against at most 900: guarded %s, simple %s', (value, U95, guarded, simple) => {
    expect(outcomeOf({ max: 900, rule: 'guarded' }, value, U95).outcome).toBe(guarded);
    expect(outcomeOf({ max: 900, rule: 'simple' }, value, U95).outcome).toBe(simple);
  });

  it('does not pass a greatest value on a value that is only a least one, and says so', () => {
    const least = { ...peak(880, 10), atLeast: true };
    const { verdicts: decided, findings } = verdicts([limit({ max: 900 })], [least]);
    expect(decided[0]).toMatchObject({ outcome: 'undecided', margin: 20 });
    expect(findings.map((f) => f.code)).toEqual(['limitAtLeast']);
    expect(findings[0].text).toContain('may be above 900 m/s2');
    // Above the limit it fails, and a least value that is asked for is kept all the more.
    expect(verdicts([limit({ max: 800 })], [least])).toMatchObject({
      verdicts: [{ outcome: 'fail' }],
      findings: [],
    });
    expect(verdicts([limit({ min: 800 })], [least])).toMatchObject({
      verdicts: [{ outcome: 'pass' }],
      findings: [],
    });
  });

  it('gives the margin to the nearest limit, negative outside', () => {
    expect(outcomeOf({ max: 900, min: 100 }, 850, 1).margin).toBe(50);
    expect(outcomeOf({ max: 900, min: 100 }, 130, 1).margin).toBe(30);
    expect(outcomeOf({ max: 900, min: 100 }, 920, 1).margin).toBe(-20);
  });

  it('takes a limit in m/s² and answers in the unit of the value', () => {
    expect(outcomeOf({ max: 900, unit: 'm/s²' }, 850, 1)).toMatchObject({ outcome: 'pass', unit: 'm/s2' });
  });

  it('leaves a limit without a value undecided and says so', () => {
    const { verdicts: decided, findings } = verdicts([limit({ max: 900 })], []);
    expect(decided).toEqual([
      { quantity: 'tip.peakAcceleration', outcome: 'undecided', rule: 'guarded', margin: null, unit: 'm/s2' },
    ]);
    expect(findings.map((f) => f.code)).toEqual(['limitWithoutValue']);
    expect(findings[0].text).toContain('tip.peakAcceleration is undecided');
  });

  it('leaves a limit in another unit undecided and says in which to state it', () => {
    const { verdicts: decided, findings } = verdicts([limit({ max: 90, unit: 'g' })], [peak(850, 1)]);
    expect(decided[0]).toMatchObject({ outcome: 'undecided', margin: null });
    expect(findings.map((f) => f.code)).toEqual(['limitUnit']);
    expect(findings[0].text).toMatch(/stated in g, the value is in m\/s2; state it in m\/s2\.$/);
  });

  it('never gets better as the value rises towards and past an upper limit', () => {
    fc.assert(
      fc.property(rule, finite, finite, expanded, finite, (named, a, b, U95, max) => {
        const [lower, higher] = [Math.min(a, b), Math.max(a, b)];
        const low = outcomeOf({ max, rule: named }, lower, U95);
        const high = outcomeOf({ max, rule: named }, higher, U95);
        expect(rank[high.outcome]).toBeGreaterThanOrEqual(rank[low.outcome]);
        expect(high.margin).toBeLessThanOrEqual(low.margin ?? Number.NaN);
      }),
    );
  });

  it('is the same for a lower limit with all signs turned', () => {
    fc.assert(
      fc.property(rule, finite, expanded, finite, (named, value, U95, max) => {
        const upper = outcomeOf({ max, rule: named }, value, U95);
        const lower = outcomeOf({ min: -max, rule: named }, -value, U95);
        expect(lower).toEqual(upper);
      }),
    );
  });

  it('a guarded pass is a simple pass, a guarded fail a simple fail', () => {
    fc.assert(
      fc.property(finite, expanded, finite, (value, U95, max) => {
        const guarded = outcomeOf({ max, rule: 'guarded' }, value, U95).outcome;
        const simple = outcomeOf({ max, rule: 'simple' }, value, U95).outcome;
        if (guarded !== 'undecided') expect(simple).toBe(guarded);
      }),
    );
  });

  it('of two limits the worse counts', () => {
    fc.assert(
      fc.property(rule, finite, expanded, finite, finite, (named, value, U95, min, max) => {
        const both = outcomeOf({ min, max, rule: named }, value, U95).outcome;
        const sides = [
          outcomeOf({ min, rule: named }, value, U95).outcome,
          outcomeOf({ max, rule: named }, value, U95).outcome,
        ];
        expect(rank[both]).toBe(Math.max(...sides.map((o) => rank[o])));
      }),
    );
  });
});
