import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Result } from '../../analysis/sheet/result.ts';
import { exactJson } from '../../main/log/exactJson.ts';
import { openLog } from '../../main/log/openLog.ts';
import { logFolder } from './logFolder.ts';
import { reductionExample } from './reductionExample.ts';

const folder = logFolder();

// -0 is left out: JSON writes it as 0
const number = fc.double({ noNaN: true, noDefaultInfinity: true }).map((v) => (v === 0 ? 0 : v));
const text = fc.string({ unit: 'binary', maxLength: 30 });
const outcome = fc.constantFrom('pass' as const, 'fail' as const, 'undecided' as const);
const place = fc.record({ x: number, y: number, score: number, state: fc.constant('measured' as const) });

const changes: fc.Arbitrary<Partial<Result>> = fc.record({
  program: fc.record({ name: fc.constant('tetherfall' as const), version: text, commit: text }),
  frames: fc.array(
    fc.record({
      n: fc.nat(),
      timeS: number,
      bodies: fc.dictionary(
        text.filter((t) => t !== '__proto__'),
        place,
        { maxKeys: 3, noNullPrototype: true },
      ),
    }),
    { maxLength: 5 },
  ),
  keyValues: fc.array(
    fc.record({
      quantity: fc.constantFrom('ball.g', 'tip.lead'),
      value: number,
      u: number,
      unit: text,
      dof: fc.option(number),
      U95: number,
      k: number,
      budget: fc.array(fc.record({ source: text, u: number }), { maxLength: 3 }),
    }),
    { maxLength: 3 },
  ),
  verdicts: fc.array(
    fc.record({
      quantity: text,
      outcome,
      rule: fc.constant('guarded' as const),
      margin: fc.option(number),
      unit: text,
    }),
    { maxLength: 3 },
  ),
  findings: fc.array(
    fc.record({
      level: fc.constantFrom('note' as const, 'caution' as const, 'stop' as const),
      code: text,
      text,
    }),
    { maxLength: 3 },
  ),
});

describe('what is saved comes back equal', () => {
  it('for any numbers and texts, at once and after the log was opened again', async () => {
    const path = await folder.path();
    await fc.assert(
      fc.asyncProperty(changes, text, async (changed, footagePath) => {
        const reduction = reductionExample(changed, footagePath);
        const log = await openLog(path);
        const summary = await log.save(reduction);
        const at = await log.get(summary.id);
        await log.close();
        const again = await openLog(path);
        try {
          for (const saved of [at, await again.get(summary.id)]) {
            expect(saved).toMatchObject(summary);
            expect(saved.sheet).toEqual(reduction.sheet);
            expect(saved.result).toEqual(reduction.result);
            expect(saved.footagePath).toBe(footagePath);
          }
          expect(await again.verify()).toBeNull();
        } finally {
          await again.close();
        }
      }),
      { numRuns: 40, seed: 20260 }, // each run opens the log twice; the seed keeps CI the same from day to day
    );
  });
});

describe('exactJson', () => {
  it('gives back every JSON value', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (value) => {
        expect(JSON.parse(exactJson(value))).toEqual(JSON.parse(JSON.stringify(value)));
      }),
    );
  });

  it.each([
    [{ a: [1, Number.NaN] }, 'a[1] is NaN'],
    [{ a: { b: Number.NEGATIVE_INFINITY } }, 'a.b is -Infinity'],
    [[1, undefined], '[1] is undefined'],
    [new Array(2), '[0] is undefined'],
    [{ a: 1n }, 'a is bigint'],
    [{ a: new Float64Array(2) }, 'a is a Float64Array'],
    [{ a: new Date(0) }, 'a is a Date'],
    [{ a: new Map() }, 'a is a Map'],
    [() => 1, 'the value is function'],
  ])('refuses what JSON would change in silence', (value, message) => {
    expect(() => exactJson(value)).toThrow(message);
  });

  it('leaves out optional fields that are not there', () => {
    expect(exactJson({ a: undefined, b: 1 })).toBe('{"b":1}');
  });
});
