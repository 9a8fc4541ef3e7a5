/**
 * Relative error of a peak from frames: two numbers decide, m = rate · w (frames in the half width at half peak) and
 * η = σ/(a w²) (noise of a position against what the peak moves the body in w).
 */
interface Chart {
  readonly m: readonly number[];
  readonly eta: readonly number[];
  /** Relative standard error, one row for each m. */
  readonly error: readonly (readonly number[])[];
}

const eta = [1e-4, 1e-3, 3e-3, 1e-2, 3e-2, 0.1];
const frames = [1, 2, 3, 4, 8, 16, 32];

/** Peak acceleration: best local polynomial of degree 6, window chosen; simulated (test/planner/peakChart.test.ts does it again). */
const accelerationChart: Chart = {
  m: frames,
  eta,
  error: [
    [0.18, 0.18, 0.18, 0.18, 0.18, 0.22],
    [0.046, 0.047, 0.049, 0.067, 0.11, 0.18],
    [0.017, 0.021, 0.032, 0.056, 0.096, 0.17],
    [0.009, 0.016, 0.027, 0.052, 0.089, 0.16],
    [0.0035, 0.011, 0.021, 0.04, 0.073, 0.13],
    [0.0021, 0.0083, 0.016, 0.033, 0.061, 0.11],
    [0.0015, 0.0066, 0.013, 0.027, 0.05, 0.095],
  ],
};

/**
 * Speed at the end of the pulse's rise, from frames before it alone (the tip turns there): best local polynomial of degree 2 to
 * 6, window chosen, for a pulse a/(1 + (t/w)²), whose speed is then π a w with what came before; simulated as above.
 */
const speedChart: Chart = {
  m: frames,
  eta,
  error: [
    [0.018, 0.028, 0.04, 0.062, 0.097, 0.157],
    [0.0045, 0.0054, 0.01, 0.025, 0.053, 0.11],
    [0.0024, 0.0032, 0.0063, 0.0175, 0.042, 0.093],
    [0.0018, 0.0024, 0.005, 0.0144, 0.036, 0.083],
    [0.0008, 0.0015, 0.0034, 0.0098, 0.026, 0.065],
    [0.0005, 0.001, 0.0025, 0.0069, 0.019, 0.05],
    [0.0005, 0.001, 0.002, 0.005, 0.0142, 0.039],
  ],
};

/** Fewer frames in the half width than this say nothing of the peak: it is the camera's figure, not the tether's. */
export const leastFramesInHalfWidth = 2;
/** Fewer than this are flagged. */
export const safeFramesInHalfWidth = 3;

/** @throws RangeError below two frames in the half width, or for a noise that is not greater than 0 */
export function peakAccelerationError(m: number, noise: number): number {
  return interpolated(accelerationChart, m, noise);
}

/** @throws RangeError below two frames in the half width, or for a noise that is not greater than 0 */
export function peakSpeedError(m: number, noise: number): number {
  return interpolated(speedChart, m, noise);
}

/** Linear in the logarithms. Beyond the chart: more frames help as √m, more noise hurts in proportion; less noise helps no more. */
function interpolated(chart: Chart, m: number, noise: number): number {
  if (!(m >= leastFramesInHalfWidth)) {
    throw new RangeError(`peakChart: ${m} frames in the half width; ${leastFramesInHalfWidth} are the least`);
  }
  if (!(noise > 0)) throw new RangeError(`peakChart: noise ${noise}`);
  const mostM = frames[frames.length - 1];
  const mostEta = eta[eta.length - 1];
  const beyond = Math.sqrt(Math.min(1, mostM / m)) * Math.max(1, noise / mostEta);
  const row = place(chart.m, Math.min(m, mostM));
  const column = place(chart.eta, Math.min(Math.max(noise, eta[0]), mostEta));
  const at = (i: number, j: number) => Math.log(chart.error[i][j]);
  const along = (i: number) => at(i, column.low) + column.share * (at(i, column.low + 1) - at(i, column.low));
  return beyond * Math.exp(along(row.low) + row.share * (along(row.low + 1) - along(row.low)));
}

function place(axis: readonly number[], value: number): { low: number; share: number } {
  let low = 0;
  while (low < axis.length - 2 && value > axis[low + 1]) low++;
  return { low, share: Math.log(value / axis[low]) / Math.log(axis[low + 1] / axis[low]) };
}
