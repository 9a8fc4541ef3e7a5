import { quinticCoefficients, quinticWeights, TAPS, TAPS_BEFORE } from './spline.ts';

/** A picture's levels as a spline, to be shifted by fractions of a pixel. */
export interface ShiftableImage {
  /** Levels of the picture moved by (dxPx, dyPx): out(x) = image(x - d); at the edges the nearest inner level stands in. */
  shifted(dxPx: number, dyPx: number): Float32Array;
}

/** Cost: 25 ms a megapixel once, and 12 multiplications a pixel for each shift. */
export function shiftableImage(level: ArrayLike<number>, widthPx: number, heightPx: number): ShiftableImage {
  const coefficients = quinticCoefficients(Float64Array.from(level), widthPx, heightPx);
  return {
    shifted(dxPx, dyPx) {
      const wx = new Float64Array(TAPS);
      const wy = new Float64Array(TAPS);
      const unused = new Float64Array(TAPS);
      const wholeX = Math.floor(-dxPx);
      const wholeY = Math.floor(-dyPx);
      quinticWeights(-dxPx - wholeX, wx, unused);
      quinticWeights(-dyPx - wholeY, wy, unused);
      const clampX = (x: number) => Math.min(widthPx - 1, Math.max(0, x));
      const clampY = (y: number) => Math.min(heightPx - 1, Math.max(0, y));
      const rows = new Float64Array(widthPx * heightPx);
      for (let y = 0; y < heightPx; y++) {
        for (let x = 0; x < widthPx; x++) {
          let sum = 0;
          for (let k = 0; k < TAPS; k++)
            sum += wx[k] * coefficients[y * widthPx + clampX(x + wholeX - TAPS_BEFORE + k)];
          rows[y * widthPx + x] = sum;
        }
      }
      const out = new Float32Array(widthPx * heightPx);
      for (let y = 0; y < heightPx; y++) {
        for (let x = 0; x < widthPx; x++) {
          let sum = 0;
          for (let k = 0; k < TAPS; k++)
            sum += wy[k] * rows[clampY(y + wholeY - TAPS_BEFORE + k) * widthPx + x];
          out[y * widthPx + x] = sum;
        }
      }
      return out;
    },
  };
}
