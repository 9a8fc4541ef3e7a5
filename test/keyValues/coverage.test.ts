import { describe, expect, it } from 'vitest';
import { numbers } from '../../analysis/keyValues/numbers.ts';
import { captureRatesHz, coverageOf, noisesM, steelBall } from './coverageOf.ts';
import { gMps2, syntheticRecord } from './syntheticRecord.ts';

const records = 60;
/**
 * Of 60 records with intervals that hold the truth 95 times in 100, fewer than 54 (0.9) do so with a chance of 3 %; the seeds are
 * fixed, so what is found here is found everywhere.
 */
const leastShare = 0.9;

const cells = captureRatesHz.flatMap((captureRateHz) =>
  noisesM.flatMap((noiseM) => [
    { captureRateHz, noiseM, micrometres: noiseM * 1e6, sphere: undefined, ball: 'in vacuum' },
    { captureRateHz, noiseM, micrometres: noiseM * 1e6, sphere: steelBall, ball: 'of steel in air' },
  ]),
);

describe('95 % intervals over synthetic records', () => {
  it.each(cells)('hold the truth at $captureRateHz Hz, $micrometres µm, ball $ball', (cell) => {
    const coverage = coverageOf(cell, records);
    for (const quantity of ['ball.g', 'tip.releaseTime', 'tip.extensionTime', 'ball.dropAtExtension']) {
      expect(coverage[quantity].share, quantity).toBeGreaterThanOrEqual(leastShare);
    }
    for (const [quantity, { given }] of Object.entries(coverage)) expect(given, quantity).toBe(records);
    // Not so wide that they would hold anything: of the order of what 60 records scatter.
    expect(coverage['tip.releaseTime'].meanU95).toBeLessThan(3 * coverage['tip.releaseTime'].greatestError);

    // Extension is a cusp here: speed without bound before, a rebound after. The lowest frame is one of the two beside it.
    const frameS = 1 / cell.captureRateHz;
    const release = coverage['tip.releaseTime'].greatestError;
    expect(coverage['tip.extensionTime'].greatestError).toBeLessThan(frameS + release);
    // The ball falls with 3.6 m/s then; its own start is uncertain by less than the noise.
    const speedMps = gMps2 * 0.363;
    expect(coverage['ball.dropAtExtension'].greatestError).toBeLessThan(speedMps * frameS + cell.noiseM);
  });

  it('holds the truth for a hollow ball, of whose acceleration drag takes a tenth', () => {
    // Drag 10 % uncertain makes ball.g uncertain by 0.04 m/s²; handbooks' correlations differ by less than that here.
    const sphere = { diameterM: 0.04, massKg: 0.0027 };
    const { 'ball.g': g } = coverageOf({ captureRateHz: 500, noiseM: 50e-6, sphere }, records);
    expect(g.share).toBeGreaterThanOrEqual(leastShare);
    expect(Math.abs(g.meanError)).toBeLessThan(0.02);
  });

  it('is off by the drag when diameter and mass are not stated, and says that drag is in it', () => {
    const { input } = syntheticRecord({ captureRateHz: 500, noiseM: 50e-6, seed: 1, sphere: steelBall });
    const bodies = input.sheet.bodies.map(({ diameterM, massKg, ...rest }) => rest);
    const { keyValues, findings } = numbers({ ...input, sheet: { ...input.sheet, bodies } });
    const g = keyValues.find((k) => k.quantity === 'ball.g');
    // Buoyancy with added mass 0.02 %, drag 0.1 to 0.2 % of g over this fall: 0.01 to 0.03 m/s² too little.
    expect(g?.value).toBeLessThan(gMps2 - 0.01);
    expect(g?.value).toBeGreaterThan(gMps2 - 0.03);
    expect(findings.map((f) => f.code)).toContain('dragNotTaken');
  });
});
