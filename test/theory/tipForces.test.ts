import { describe, expect, it } from 'vitest';
import { numbers } from '../../analysis/keyValues/numbers.ts';
import { loadCellSchema } from '../../analysis/sheet/loadCell.ts';
import { seededRandom } from '../../fixtures/random.ts';
import { shareFallen } from '../keyValues/foldedTetherTruth.ts';
import { gMps2, syntheticRecord } from '../keyValues/syntheticRecord.ts';

// A tip's positions in energy form with 20 µm of noise at 1000 frames/s, and the cell's record of the same drop from the closed form
// F/mg = (2 + 2s - 3s²)/(4(1 - s)) (Calkin & March 1989, from memory), on a clock of its own.
const { input, truth } = syntheticRecord({ captureRateHz: 1000, noiseM: 20e-6, seed: 5 });
const stated = input.sheet.tether;
if (!stated) throw new Error('the record has no tether');
const { lengthM } = stated;
const massKg = 0.21;
const tether = { ...stated, massKg, uMassKg: 0.0001, tipMassKg: 0 };
const releaseS = truth['tip.releaseTime'];
const pullOf = (t: number) => {
  const s = Math.min(0.995, shareFallen((t - releaseS) / Math.sqrt(lengthM / gMps2)));
  return (massKg * gMps2 * (2 + 2 * s - 3 * s * s)) / (4 * (1 - s));
};
const lateS = 11.25;
const random = seededRandom(6);
const timeS = Float64Array.from({ length: 12_000 }, (_, i) => i / 20_000 + lateS - 0.05);
const forceRecord = { timeS, forceN: timeS.map((t) => pullOf(t - lateS) + 0.02 * random.gaussian()) };
const loadCell = loadCellSchema.parse({
  path: 'cell.csv',
  samplingRateHz: 20_000,
  channelFrequencyClass: 1000,
  uForceRel: 0.005,
  synchronisation: { kind: 'crossCorrelation' },
});

describe('a drop with a load cell', () => {
  const found = numbers({ ...input, sheet: { ...input.sheet, tether, loadCell }, forceRecord });

  it('pulls on the anchor as the closed form says, within the stated uncertainty', () => {
    const { tension } = found;
    expect(tension?.timeS.length).toBeGreaterThan(200);
    let inside = 0;
    tension?.timeS.forEach((t, i) => {
      if (Math.abs(tension.anchorN[i] - pullOf(t)) < 2 * tension.uAnchorN[i]) inside++;
    });
    // 95 % asked of all instants; one drop, whose errors are alike over tens of frames
    expect(inside / (tension?.timeS.length ?? 0)).toBeGreaterThan(0.85);
  });

  it('is brought to one clock with it and agrees', () => {
    const codes = found.findings.map((f) => f.code);
    expect(codes).toContain('loadCellAgrees');
    expect(Math.abs((found.loadCell?.offsetS ?? 0) + lateS)).toBeLessThan(
      4 * (found.loadCell?.uOffsetS ?? 0),
    );
  });

  it('is refused the comparison without the mass of the tether', () => {
    const bare = { ...input.sheet, loadCell, tether: { ...tether, massKg: undefined } };
    const without = numbers({ ...input, sheet: bare, forceRecord });
    expect(without.loadCell).toBeNull();
    expect(without.findings.map((f) => f.code)).toContain('tetherMassMissing');
  });
});
