/** Taps of a quintic B-spline: the six coefficients that carry a value. */
export const TAPS = 6;
/** How far the first tap is before the whole part of the coordinate. */
export const TAPS_BEFORE = 2;

// Poles of the quintic direct filter (Unser, Aldroubi & Eden, IEEE Trans. Signal Process. 41 (1993) 821).
const poles = [
  Math.sqrt(135 / 2 - Math.sqrt(17745 / 4)) + Math.sqrt(105 / 4) - 13 / 2,
  Math.sqrt(135 / 2 + Math.sqrt(17745 / 4)) - Math.sqrt(105 / 4) - 13 / 2,
];
/** Terms of the mirrored start sum beyond which |z|^k is below double precision. */
const horizon = poles.map((z) => Math.ceil(Math.log(1e-16) / Math.log(Math.abs(z))));

function filterLine(line: Float64Array, offset: number, stride: number, count: number): void {
  if (count === 1) return;
  let gain = 1;
  for (const z of poles) gain *= (1 - z) * (1 - 1 / z);
  for (let i = 0, at = offset; i < count; i++, at += stride) line[at] *= gain;
  for (let p = 0; p < poles.length; p++) {
    const z = poles[p];
    // Mirror at the first sample; where the line is short the sum is cut, an error below |z|^count.
    let sum = line[offset];
    let power = z;
    const terms = Math.min(horizon[p], count - 1);
    for (let k = 1; k <= terms; k++) {
      sum += power * line[offset + k * stride];
      power *= z;
    }
    line[offset] = sum;
    for (let i = 1, at = offset + stride; i < count; i++, at += stride) line[at] += z * line[at - stride];
    const last = offset + (count - 1) * stride;
    line[last] = (z / (z * z - 1)) * (line[last] + z * line[last - stride]);
    for (let i = count - 2, at = last - stride; i >= 0; i--, at -= stride)
      line[at] = z * (line[at + stride] - line[at]);
  }
}

/**
 * Coefficients of the quintic B-spline that passes through the samples; mirrored at the edges.
 *
 * @param samples  width · height values, row by row; overwritten with the coefficients and returned
 */
export function quinticCoefficients(samples: Float64Array, width: number, height: number): Float64Array {
  for (let row = 0; row < height; row++) filterLine(samples, row * width, 1, width);
  for (let column = 0; column < width; column++) filterLine(samples, column, width, height);
  return samples;
}

const signedBinomials = [1, -6, 15, -20, 15, -6, 1];

/**
 * Weights of the six taps for a value and for its derivative at fraction t after the whole coordinate.
 * Tap k belongs to coefficient whole - TAPS_BEFORE + k. Truncated powers of the quintic B-spline.
 *
 * @param t        0 ≤ t < 1
 * @param weights  six values, written
 * @param slopes   six values, written: derivative with respect to the coordinate
 */
export function quinticWeights(t: number, weights: Float64Array, slopes: Float64Array): void {
  for (let k = 0; k < TAPS; k++) {
    const x = t - (k - TAPS_BEFORE);
    let value = 0;
    let slope = 0;
    for (let j = 0; j < signedBinomials.length; j++) {
      const d = x + 3 - j;
      if (d <= 0) break;
      const d4 = d * d * d * d;
      slope += signedBinomials[j] * d4;
      value += signedBinomials[j] * d4 * d;
    }
    weights[k] = value / 120;
    slopes[k] = slope / 24;
  }
}

/** Values at the samples themselves of a quintic spline on a square of the given side; mirrored at the edges. */
export function quinticSamples(coefficients: Float64Array, side: number): Float64Array {
  const weights = new Float64Array(TAPS);
  quinticWeights(0, weights, new Float64Array(TAPS));
  const mirrored = (i: number) => (i < 0 ? -i : i >= side ? 2 * (side - 1) - i : i);
  const along = (from: Float64Array, stride: number, other: number) => {
    const out = new Float64Array(from.length);
    for (let line = 0; line < side; line++) {
      for (let i = 0; i < side; i++) {
        let sum = 0;
        for (let k = 0; k < TAPS; k++)
          sum += weights[k] * from[line * other + mirrored(i - TAPS_BEFORE + k) * stride];
        out[line * other + i * stride] = sum;
      }
    }
    return out;
  };
  return along(along(coefficients, 1, side), side, 1);
}

/** Slopes, at the samples themselves, of the quintic spline through width · height values [per sample]. */
export function slopesOf(
  values: ArrayLike<number>,
  width: number,
  height: number,
): { slopeX: Float64Array; slopeY: Float64Array } {
  const coefficients = quinticCoefficients(Float64Array.from(values), width, height);
  const weights = new Float64Array(TAPS);
  const slopes = new Float64Array(TAPS);
  quinticWeights(0, weights, slopes);
  const along = (taps: Float64Array, from: Float64Array, stepX: number, stepY: number) => {
    const out = new Float64Array(from.length);
    for (let y = 0; y < height; y++) {
      for (let x = 0; x < width; x++) {
        let sum = 0;
        for (let k = 0; k < TAPS; k++) {
          const tapX = Math.min(width - 1, Math.max(0, x + stepX * (k - TAPS_BEFORE)));
          const tapY = Math.min(height - 1, Math.max(0, y + stepY * (k - TAPS_BEFORE)));
          sum += taps[k] * from[tapY * width + tapX];
        }
        out[y * width + x] = sum;
      }
    }
    return out;
  };
  return {
    slopeX: along(slopes, along(weights, coefficients, 0, 1), 1, 0),
    slopeY: along(slopes, along(weights, coefficients, 1, 0), 0, 1),
  };
}
