import type { Finding, KeyValue, Verdict } from '../sheet/result.ts';
import type { SheetLimit } from '../sheet/sheet.ts';
import { decisionRules, type Outcome } from './decisionRules.ts';
import { sameUnit } from './sameUnit.ts';

/**
 * Holds each limit against its key value. A limit whose quantity has no value, or is stated in another unit, is undecided, as is a
 * greatest value that a least one seems to keep; a finding says why.
 */
export function verdicts(
  limits: readonly SheetLimit[],
  keyValues: readonly KeyValue[],
): { verdicts: Verdict[]; findings: Finding[] } {
  const findings: Finding[] = [];
  const decided = limits.map((limit): Verdict => {
    const value = keyValues.find((k) => k.quantity === limit.quantity);
    const open = {
      quantity: limit.quantity,
      outcome: 'undecided',
      rule: limit.rule,
      margin: null,
      unit: limit.unit,
    } as const;
    if (!value) {
      findings.push({
        level: 'caution',
        code: 'limitWithoutValue',
        text: `The limit on ${limit.quantity} is undecided: the footage gave no value for it (see the other findings).`,
      });
      return open;
    }
    if (!sameUnit(value.unit, limit.unit)) {
      findings.push({
        level: 'caution',
        code: 'limitUnit',
        text: `The limit on ${limit.quantity} is undecided: it is stated in ${limit.unit}, the value is in ${value.unit}; state it in ${value.unit}.`,
      });
      return open;
    }
    const verdict = decide(limit, value);
    if (verdict.outcome === 'pass' && limit.max !== undefined && value.atLeast) {
      findings.push({
        level: 'caution',
        code: 'limitAtLeast',
        text: `The limit on ${limit.quantity} is undecided: the value is only a least one (see the other findings), and the true one may be above ${limit.max} ${limit.unit}.`,
      });
      return { ...verdict, outcome: 'undecided' };
    }
    return verdict;
  });
  return { verdicts: decided, findings };
}

function decide(limit: SheetLimit, value: KeyValue): Verdict {
  const sides: number[] = [];
  if (limit.max !== undefined) sides.push(limit.max - value.value);
  if (limit.min !== undefined) sides.push(value.value - limit.min);
  const outcomes = sides.map((insideBy) => decisionRules[limit.rule](insideBy, value.U95));
  return {
    quantity: limit.quantity,
    outcome: worst(outcomes),
    rule: limit.rule,
    margin: Math.min(...sides),
    unit: value.unit,
  };
}

function worst(outcomes: readonly Outcome[]): Outcome {
  if (outcomes.includes('fail')) return 'fail';
  return outcomes.includes('undecided') ? 'undecided' : 'pass';
}
