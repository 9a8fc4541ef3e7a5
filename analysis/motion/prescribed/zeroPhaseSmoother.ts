import type { Piece } from '../method.ts';
import {
  type EndSlopes,
  endParabola,
  endSlopes,
  fadeFrames,
  filterLevelled,
  leastPoints,
  startParabola,
} from './levelled.ts';
import type { Derivatives, LinearSmoother } from './linearSmoother.ts';
import { forwardAndBackward, type LowPass, mirrored } from './lowPass.ts';
import { responseBandwidth } from './responseBandwidth.ts';

/** Differences reach two points beyond an instant. */
const reach = 2;
/** Weights of the filtered points about an instant, -2 … 2, for each quantity; central differences, in powers of the step. */
const differences = {
  position: [0, 0, 1, 0, 0],
  velocity: [0, -0.5, 0, 0.5, 0],
  acceleration: [0, 1, -2, 1, 0],
  jerk: [-0.5, 1, 0, -1, 0.5],
} as const;
const quantities = ['position', 'velocity', 'acceleration', 'jerk'] as const;
type Quantity = (typeof quantities)[number];
const order: Readonly<Record<Quantity, number>> = { position: 0, velocity: 1, acceleration: 2, jerk: 3 };

/** For uncertainties the filter's memory is taken as faded, to 1e-5, after so many of its time constants. */
const faded = 11;

/**
 * A low-pass run forward and backward over positions at even times, and central differences of what comes out.
 *
 * @param cornerHz  of one run, for how far its memory reaches
 * @returns null when there are too few points
 */
export function zeroPhaseSmoother(
  { timeS, uM }: Piece,
  filter: LowPass,
  cornerHz: number,
  settings: LinearSmoother['settings'],
): LinearSmoother | null {
  const n = timeS.length;
  if (n < leastPoints) return null;
  const stepS = (timeS[n - 1] - timeS[0]) / (n - 1);
  const apply = (values: Float64Array): Derivatives => {
    const { filtered, padded, level, startSlope, endSlope } = filterLevelled(values, filter, cornerHz, stepS);
    const of = (quantity: Quantity): Float64Array =>
      values.map(
        (_, i) =>
          difference(filtered, padded + i, quantity, stepS) +
          startSlope * startParabola(i, n, stepS)[order[quantity]] +
          endSlope * endParabola(i, n, stepS)[order[quantity]] +
          (quantity === 'position' ? level : 0),
      );
    return {
      position: of('position'),
      velocity: of('velocity'),
      acceleration: of('acceleration'),
      jerk: withoutEnds(of('jerk')),
    };
  };

  const slopes = endSlopes(n, stepS, cornerHz);
  const noiseReach = Math.ceil(faded * fadeFrames(cornerHz, stepS)) + reach;
  const kernel = impulseResponse(filter, noiseReach);
  const kernelOf = (quantity: Quantity) => differenced(kernel, quantity, stepS);
  const uOf = (quantity: Quantity) => propagated(kernelOf(quantity), uM, slopes, order[quantity], stepS);
  const acceleration = kernelOf('acceleration');
  const offsetsS = acceleration.map((_, k) => (k - (acceleration.length - 1) / 2) * stepS);
  const bandwidthHz = responseBandwidth(acceleration, offsetsS, 0.5 / stepS);
  return {
    apply,
    uNoise: {
      position: uOf('position'),
      velocity: uOf('velocity'),
      acceleration: uOf('acceleration'),
      jerk: withoutEnds(uOf('jerk')),
    },
    bandwidthHz: new Float64Array(n).fill(bandwidthHz),
    settings,
  };
}

/** At the very ends the mirror makes any jerk zero: that is no value. */
function withoutEnds(jerk: Float64Array): Float64Array {
  jerk[0] = Number.NaN;
  jerk[jerk.length - 1] = Number.NaN;
  return jerk;
}

function difference(values: Float64Array, at: number, quantity: Quantity, stepS: number): number {
  let sum = 0;
  for (let k = -reach; k <= reach; k++) sum += differences[quantity][k + reach] * values[at + k];
  return sum / stepS ** order[quantity];
}

/** Weights of both runs on a long record, from -length to length. */
function impulseResponse(filter: LowPass, length: number): Float64Array {
  const impulse = new Float64Array(2 * length + 1);
  impulse[length] = 1;
  return forwardAndBackward(impulse, filter, length).slice(length, length + impulse.length);
}

/** Weights of a quantity on the positions: the response shifted by each point of the difference. */
function differenced(kernel: Float64Array, quantity: Quantity, stepS: number): Float64Array {
  return kernel.map((_, k) => {
    let sum = 0;
    for (let d = -reach; d <= reach; d++) sum += differences[quantity][d + reach] * (kernel[k - d] ?? 0);
    return sum / stepS ** order[quantity];
  });
}

/**
 * Standard uncertainty at each point. In the middle the weights are the kernel; near an end they are the kernel folded back by the
 * mirror, and what the parabola's slope there does.
 */
function propagated(
  kernel: Float64Array,
  uM: Float64Array,
  { start, end }: EndSlopes,
  derivative: number,
  stepS: number,
): Float64Array {
  const n = uM.length;
  const half = (kernel.length - 1) / 2;
  const fold = (i: number) => {
    const weights = new Float64Array(n);
    for (let k = -half; k <= half; k++) weights[mirrored(i + k, n)] += kernel[k + half];
    return weights;
  };
  return Float64Array.from({ length: n }, (_, i) => {
    if (i >= half && i < n - half) {
      let sum = 0;
      for (let k = -half; k <= half; k++) sum += (kernel[k + half] * uM[i + k]) ** 2;
      return Math.sqrt(sum);
    }
    const weights = fold(i);
    const ofParabola = (parabola: typeof startParabola) => {
      let filtered = 0;
      for (let j = 0; j < n; j++) filtered += weights[j] * parabola(j, n, stepS)[0];
      return parabola(i, n, stepS)[derivative] - filtered;
    };
    const byStart = ofParabola(startParabola);
    const byEnd = ofParabola(endParabola);
    for (let k = 0; k < start.weights.length; k++) {
      weights[start.from + k] += byStart * start.weights[k];
      weights[end.from + k] += byEnd * end.weights[k];
    }
    return Math.sqrt(weights.reduce((sum, w, j) => sum + (w * uM[j]) ** 2, 0));
  });
}
