import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { frameTimes } from '../../analysis/clock/frameTimes.ts';

const milliseconds = { num: 1, den: 1000 };
const coded = (pts: (number | null)[]) => ({ pts, timeBase: milliseconds });

describe('frameTimes', () => {
  it('counts frames by the capture rate, whatever the file says', () => {
    const times = frameTimes({ kind: 'captureRate', captureRateHz: 500 }, coded([null, 7, 3]), null, 0, 2);
    expect(times.ok && [...times.timeS]).toEqual([0, 0.002, 0.004]);
  });

  it("takes the file's own times from its first frame on", () => {
    const times = frameTimes({ kind: 'container' }, coded([40, 41, 45]), null, 0, 2);
    expect(times.ok && [...times.timeS]).toEqual([0, 0.001, 0.005]);
  });

  it('refuses to invent a time that the file does not give', () => {
    const times = frameTimes({ kind: 'container' }, coded([0, null, 2]), null, 0, 2);
    expect(times).toMatchObject({ ok: false, problem: expect.stringContaining('lack a time for frame 1') });
  });

  it('refuses times that go backwards, and says where', () => {
    const times = frameTimes({ kind: 'container' }, coded([0, 2, 1]), null, 0, 2);
    expect(times).toMatchObject({ ok: false, problem: expect.stringContaining('from frame 1 to frame 2') });
  });

  it('refuses a list that is too short', () => {
    const times = frameTimes(
      { kind: 'timestamps', path: 't.csv' },
      coded([0, 1, 2]),
      Float64Array.of(0, 1),
      0,
      2,
    );
    expect(times).toMatchObject({ ok: false, problem: expect.stringContaining('the list has 2 times') });
  });

  it('uses uneven times as they are and says how many steps are odd', () => {
    const times = frameTimes({ kind: 'container' }, coded([0, 1, 2, 3, 9, 10]), null, 0, 5);
    expect(times).toMatchObject({
      ok: true,
      findings: [{ code: 'timesUneven', text: expect.stringContaining('1 of 5 steps') }],
    });
  });

  it('gives strictly increasing times or a problem, never anything else', () => {
    fc.assert(
      fc.property(
        fc.array(fc.option(fc.integer({ min: -1e6, max: 1e6 })), { minLength: 2, maxLength: 20 }),
        (pts) => {
          const times = frameTimes({ kind: 'container' }, coded(pts), null, 0, pts.length - 1);
          if (times.ok)
            for (let n = 1; n < pts.length; n++) expect(times.timeS[n]).toBeGreaterThan(times.timeS[n - 1]);
          else expect(times.problem).toContain('state clock.kind');
        },
      ),
    );
  });
});
