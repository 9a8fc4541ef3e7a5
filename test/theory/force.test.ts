import { describe, expect, it } from 'vitest';
import { loadCellSchema } from '../../analysis/sheet/loadCell.ts';
import { holdLoadCell } from '../../analysis/theory/force/holdLoadCell.ts';
import { parseForceRecord } from '../../analysis/theory/force/parseForceRecord.ts';
import { synchronise } from '../../analysis/theory/force/synchronise.ts';
import { type TensionInput, tensionOf } from '../../analysis/theory/force/tension.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { publishedRows } from '../published/publishedRows.ts';
import { gMps2, lengthM } from './theoryInput.ts';

const massKg = 0.2;
const releaseS = 0.05;
const unitS = Math.sqrt(lengthM / gMps2);

/** The table of the folded tether (its own quadrature, see its file) as a motion in SI units. */
function motionOf(gamma: number) {
  const rows = publishedRows('folded-tether.csv')
    .filter((r) => Number(r.gamma) === gamma && Number(r.s) > 0 && Number(r.s) < 0.96)
    .map((r) => ({ s: Number(r.s), v2: Number(r.v2), a: Number(r.a), f: Number(r.F), t: Number(r.t) }));
  const of = (value: (r: (typeof rows)[number]) => number) => rows.map(value);
  const motion = {
    timeS: of((r) => releaseS + r.t * unitS),
    yM: of((r) => -r.s * lengthM),
    vyMps: of((r) => -Math.sqrt(r.v2 * gMps2 * lengthM)),
    ayMps2: of((r) => -r.a * gMps2),
    uYM: of(() => 2e-5),
    uVyMps: of(() => 0.002),
    uAyMps2: of(() => 0.5),
  };
  return { rows, motion };
}

const inputOf = (gamma: number): TensionInput => ({
  motion: motionOf(gamma).motion,
  startYM: 0,
  releaseS,
  untilS: 1,
  massKg,
  uMassKg: 1e-4,
  tipMassKg: 0,
  uTipMassKg: 0,
  lengthM,
  uLengthM: 0.001,
  gravity: { gMps2, uGMps2: 1e-4 },
  uLengthRel: 0.001,
});

describe.each([0, 0.5, 0.75, 0.9, 1])('forces of a tether whose fold keeps %f of the energy', (gamma) => {
  const { rows } = motionOf(gamma);
  const tension = tensionOf(inputOf(gamma));

  it('pull the anchor as the table says', () => {
    expect(tension.timeS).toHaveLength(rows.length);
    rows.forEach(({ f }, i) => {
      // nine digits in v² and a
      expect(Math.abs(tension.anchorN[i] / (f * massKg * gMps2) - 1)).toBeLessThan(1e-7);
    });
  });

  it('pull the falling arm with its share of m v²/4L', () => {
    rows.forEach(({ v2 }, i) => {
      expect(Math.abs(tension.foldN[i] - (gamma * v2 * massKg * gMps2) / 4)).toBeLessThan(1e-6);
    });
  });

  it('lose no energy where all is kept, and half of what is set free by s = 2/3 where none is', () => {
    if (gamma === 1) for (const lost of tension.energyLostJ) expect(Math.abs(lost)).toBeLessThan(1e-7);
    // Momentum form: free m g L(s/2 - s²/4), moving m g L (1 - s) s/2: lost is m g L s²/4
    if (gamma === 0)
      rows.forEach(({ s }, i) => {
        expect(Math.abs(tension.energyLostJ[i] - (massKg * gMps2 * lengthM * s * s) / 4)).toBeLessThan(1e-7);
      });
  });
});

describe('uncertainty of the pull', () => {
  it('covers what errors of motion, masses and scale do to it', () => {
    // Each input drawn about its value; the true pull is the undisturbed one.
    const random = seededRandom(4);
    const input = inputOf(1);
    const truth = tensionOf(input);
    let inside = 0;
    let all = 0;
    for (let draw = 0; draw < 300; draw++) {
      const c = 1 + input.uLengthRel * random.gaussian();
      const noisy = (values: readonly number[], u: readonly number[]) =>
        values.map((v, i) => c * v + u[i] * random.gaussian());
      const { motion } = input;
      const drawn = tensionOf({
        ...input,
        massKg: input.massKg + input.uMassKg * random.gaussian(),
        lengthM: input.lengthM + input.uLengthM * random.gaussian(),
        gravity: { gMps2: gMps2 + 1e-4 * random.gaussian(), uGMps2: 1e-4 },
        motion: {
          ...motion,
          yM: noisy(motion.yM, motion.uYM),
          vyMps: noisy(motion.vyMps, motion.uVyMps),
          ayMps2: noisy(motion.ayMps2, motion.uAyMps2),
        },
      });
      drawn.anchorN.forEach((f, i) => {
        all++;
        if (Math.abs(f - truth.anchorN[i]) < 1.96 * drawn.uAnchorN[i]) inside++;
      });
    }
    // 95 %; errors of mass and scale are common to a draw, so 300 draws scatter by about 1 %
    expect(inside / all).toBeGreaterThan(0.92);
    expect(inside / all).toBeLessThan(0.98);
  });
});

describe('parseForceRecord', () => {
  const rows = (n: number) => Array.from({ length: n }, (_, i) => `${i / 1000},${i}`).join('\n');

  it('reads time and force, with or without a line of names', () => {
    for (const text of [
      rows(20),
      `time,force\n${rows(20)}\n`,
      `time;force\r\n${rows(20).replaceAll(',', ';')}`,
    ]) {
      const record = parseForceRecord(text);
      if ('problem' in record) throw new Error(record.problem);
      expect(record.forceN).toHaveLength(20);
      expect(record.timeS[19]).toBe(0.019);
    }
  });

  it.each([
    ['', /line 1 has no two columns/],
    [`t,F\n${rows(20)}\nlate,3`, /line 22 is no time in s and force in N \("late,3"\)/],
    [`t;F\n0,001;2\n`, /line 2 .*use a point for decimals/],
    [`${rows(20)}\n0.019,4`, /line 21: its time, 0\.019 s, is not after the one before/],
    [rows(3), /it holds 3 rows/],
  ])('says what is wrong with %j', (text, problem) => {
    const record = parseForceRecord(text);
    expect('problem' in record && record.problem).toMatch(problem);
  });
});

describe('load cell', () => {
  // The momentum form in closed form, F = m g (1 + 3 s)/2 with s = g τ²/2L, dropping to the hanging weight after; every 0.1 ms.
  const restsN = massKg * gMps2;
  const pull = (t: number) => {
    const s = (gMps2 * Math.max(0, t - releaseS) ** 2) / (2 * lengthM);
    return s < 1 ? (restsN * (1 + 3 * s)) / 2 : restsN;
  };
  const lateS = 0.0837;
  const record = (gain: number, seed = 1) => {
    const random = seededRandom(seed);
    const timeS = Float64Array.from({ length: 10_000 }, (_, i) => 1.8 + i / 10_000);
    return { timeS, forceN: timeS.map((t) => gain * pull(t - 2 + lateS) + 0.01 * random.gaussian()) };
  };
  const timeS = Array.from({ length: 400 }, (_, i) => releaseS + (i + 1) / 1000).filter(
    (t) => (gMps2 * (t - releaseS) ** 2) / 2 < 0.97 * lengthM,
  );
  const tension = {
    timeS,
    anchorN: timeS.map(pull),
    uAnchorN: timeS.map(() => 0.02),
    foldN: [],
    uFoldN: [],
    energyLostJ: [],
    uEnergyLostJ: [],
  };
  const extensionS = releaseS + Math.SQRT2 * unitS;
  const trueOffsetS = lateS - 2;
  const stated = (kind: 'crossCorrelation' | 'peak') =>
    loadCellSchema.parse({
      path: 'cell.csv',
      samplingRateHz: 10_000,
      channelFrequencyClass: 600,
      uForceRel: 0.01,
      synchronisation: { kind },
    });

  it('is brought to the clock of the footage by cross-correlation within its uncertainty', () => {
    const found = holdLoadCell(record(1), stated('crossCorrelation'), tension, extensionS, 200);
    expect(found.loadCell?.uOffsetS).toBeLessThan(1.5e-3);
    // four of its uncertainties
    expect(Math.abs((found.loadCell?.offsetS ?? 0) - trueOffsetS)).toBeLessThan(
      4 * (found.loadCell?.uOffsetS ?? 0),
    );
    expect(found.findings.map((f) => f.code)).toEqual(['loadCellAgrees']);
    expect(found.findings[0].text).toMatch(/by cross-correlation: -191\d\.\d\d ms to be added/);
  });

  it('is brought there by its peak too, and does not care for its gain', () => {
    // The ramp ends at extension with its largest pull; noise of 10 mN on 36 N/s·… moves the peak by under 2 ms
    const found = synchronise(record(2), tension, extensionS, { kind: 'peak' });
    expect(Math.abs((found?.offsetS ?? 0) - trueOffsetS)).toBeLessThan(0.002);
    expect(synchronise(record(2), tension, null, { kind: 'peak' })).toBeNull();
  });

  it('that reads 10 % too much disagrees', () => {
    const found = holdLoadCell(record(1.1), stated('crossCorrelation'), tension, extensionS, 200);
    expect(found.findings.map((f) => f.code)).toEqual(['loadCellDisagrees']);
  });

  it('of another drop is hardly alike', () => {
    const random = seededRandom(9);
    const other = { ...record(1), forceN: Float64Array.from({ length: 10_000 }, () => random.gaussian()) };
    const found = holdLoadCell(other, stated('crossCorrelation'), tension, extensionS, 200);
    expect(found.findings.map((f) => f.code)).toEqual(['loadCellUnlike']);
  });

  it('that is too short, too slow, or not as stated is said to be so', () => {
    const whole = record(1);
    const cut = (from: number, to: number) => ({
      timeS: whole.timeS.slice(from, to),
      forceN: whole.forceN.slice(from, to),
    });
    // half a tenth of a second of it, and one that starts after the release
    for (const part of [cut(0, 500), cut(2000, 10_000)]) {
      const { findings, loadCell } = holdLoadCell(part, stated('crossCorrelation'), tension, extensionS, 200);
      expect(loadCell).toBeNull();
      expect(findings.at(-1)?.code).toBe('loadCellNotSynchronised');
    }
    const wrong = { ...stated('crossCorrelation'), samplingRateHz: 5000 };
    const codes = holdLoadCell(whole, wrong, tension, extensionS, 5000).findings.map((f) => f.code);
    expect(codes).toEqual(['samplingRateDisagrees', 'samplingRateLow', 'loadCellAgrees', 'loadCellSlower']);
  });
});
