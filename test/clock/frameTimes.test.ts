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

  it('uses uneven times as they are and says where frames are missing or too close', () => {
    const times = frameTimes(
      { kind: 'container' },
      {
        pts: [0, 100, 200, 300, 900, 1000, 1010, 1100, 1200, 1290, 1390],
        timeBase: { num: 1, den: 100_000 },
      },
      null,
      0,
      10,
    );
    expect(times).toMatchObject({
      ok: true,
      findings: [
        {
          level: 'caution',
          code: 'framesMissing',
          text: expect.stringMatching(/1 of 10 steps.*frames 3 to 4\): about 5 frames are missing/),
        },
        { level: 'caution', code: 'framesTooClose', text: expect.stringContaining('frames 5 to 6') },
        { level: 'note', code: 'timesUneven', text: expect.stringContaining('2 of 10 steps') },
        { level: 'note', code: 'timesRounded' },
      ],
    });
  });

  it('honours a rate that varies without a word where it varies little', () => {
    const pts = Array.from({ length: 50 }, (_, n) => 10_000 * n + Math.round(300 * Math.sin(n)));
    const times = frameTimes({ kind: 'container' }, { pts, timeBase: { num: 1, den: 1e7 } }, null, 0, 49);
    expect(times).toMatchObject({ ok: true, findings: [] });
    expect(times.ok && times.timeS[7]).toBeCloseTo((pts[7] - pts[0]) / 1e7, 15);
  });

  it('says how coarsely the file rounds its times', () => {
    const pts = Array.from({ length: 20 }, (_, n) => Math.round((n * 1000) / 240));
    const times = frameTimes({ kind: 'container' }, coded(pts), null, 0, 19);
    // 1 ms of 4 ms (the usual step after rounding); 1 ms/√12 = 0.29 ms
    expect(times.ok && times.findings.find((f) => f.code === 'timesRounded')).toMatchObject({
      level: 'caution',
      text: expect.stringMatching(/multiples of 1 ms, 25 %.*uncertain by 0\.29 ms/),
    });
  });

  it.each<[string, Parameters<typeof frameTimes>[0]]>([
    ['the capture rate', { kind: 'captureRate', captureRateHz: 1000 }],
    ["the file's own times", { kind: 'container' }],
    ['a second clock', { kind: 'secondClock', secondClock: { fromFrame: 0, toFrame: 3, intervalS: 0.003 } }],
  ])('refuses an exposure longer than the time from frame to frame by %s', (_name, clock) => {
    const of = (exposureS: number) => frameTimes(clock, coded([0, 1, 2, 3]), null, 0, 3, exposureS);
    expect(of(0.0011)).toMatchObject({
      ok: false,
      problem: expect.stringContaining('camera.exposureS (0.0011 s)'),
    });
    expect(of(0.001).ok).toBe(true);
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
