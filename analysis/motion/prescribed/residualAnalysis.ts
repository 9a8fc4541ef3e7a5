import { endParabola, filterLevelled, startParabola } from './levelled.ts';
import { lowPass, twoRunShare } from './lowPass.ts';

/** Cut-offs tried: from two periods in the record up to half of half the frame rate, so many. */
const tried = 60;
/** Between these shares of half the frame rate the residual is noise alone and falls along a line. */
const lineFrom = 0.25;
const lineTo = 0.5;

/**
 * Cut-off frequency by residual analysis: the RMS of what the filter takes away falls, towards high cut-offs, along the line of
 * noise alone; prolonged to a cut-off of zero that line gives the noise itself, and the cut-off is taken where the residual equals
 * it (Winter, Biomechanics and Motor Control of Human Movement, ch. 2).
 *
 * @param values  at even times
 * @returns [Hz], where both runs together are 3 dB down
 */
export function cutoffByResiduals(values: Float64Array, stepS: number): number {
  const n = values.length;
  const halfRateHz = 0.5 / stepS;
  const residual = (cutoffHz: number): number => {
    const filter = lowPass(Math.tan(Math.PI * cutoffHz * stepS) / twoRunShare);
    const { filtered, padded, level, startSlope, endSlope } = filterLevelled(values, filter, cutoffHz, stepS);
    let sum = 0;
    for (let i = 0; i < n; i++) {
      const parabolas = startSlope * startParabola(i, n, stepS)[0] + endSlope * endParabola(i, n, stepS)[0];
      sum += (values[i] - level - parabolas - filtered[padded + i]) ** 2;
    }
    return Math.sqrt(sum / n);
  };
  const noise = interceptOf(
    Array.from({ length: 12 }, (_, k) => {
      const hz = halfRateHz * (lineFrom + ((lineTo - lineFrom) * k) / 11);
      return [hz, residual(hz)];
    }),
  );
  const leastHz = 2 / (n * stepS);
  const ratio = ((lineFrom * halfRateHz) / leastHz) ** (1 / (tried - 1));
  let below = leastHz;
  if (residual(leastHz) <= noise) return leastHz;
  for (let k = 1; k < tried; k++) {
    const hz = leastHz * ratio ** k;
    if (residual(hz) <= noise) return bisected((f) => residual(f) <= noise, below, hz);
    below = hz;
  }
  return lineFrom * halfRateHz;
}

/** Value at zero of the least-squares line. */
function interceptOf(points: readonly (readonly number[])[]): number {
  const mean = (k: number) => points.reduce((s, p) => s + p[k], 0) / points.length;
  const [mx, my] = [mean(0), mean(1)];
  const slope =
    points.reduce((s, [x, y]) => s + (x - mx) * (y - my), 0) /
    points.reduce((s, [x]) => s + (x - mx) ** 2, 0);
  return my - slope * mx;
}

function bisected(reached: (x: number) => boolean, from: number, to: number): number {
  let [low, high] = [from, to];
  for (let k = 0; k < 20; k++) {
    const middle = (low + high) / 2;
    if (reached(middle)) high = middle;
    else low = middle;
  }
  return high;
}
