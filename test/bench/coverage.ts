import { captureRatesHz, coverageOf, noisesM, steelBall } from '../keyValues/coverageOf.ts';

/** Prints how often 95 % intervals hold the truth, for every capture rate and noise: `npx tsx test/bench/coverage.ts`. */
const records = 200;
for (const captureRateHz of captureRatesHz) {
  for (const noiseM of noisesM) {
    const coverage = coverageOf({ captureRateHz, noiseM, sphere: steelBall }, records);
    const columns = Object.entries(coverage).map(
      ([quantity, c]) =>
        `${quantity} ${(100 * c.share).toFixed(0)} % (mean error ${c.meanError.toExponential(1)}, mean U95 ${c.meanU95.toExponential(1)})`,
    );
    console.log(`${captureRateHz} Hz, ${(noiseM * 1e6).toFixed(0)} µm: ${columns.join('; ')}`);
  }
}
