import { medianStepS } from './evenTimes.ts';
import type { LinearSmoother } from './linearSmoother.ts';
import type { MethodWithSettings, PrescribedMethod } from './prescribedMethod.ts';
import { responseBandwidth } from './responseBandwidth.ts';
import { byRows, type InstantRows, type Row, uOfSum, weightedSum } from './rows.ts';

/**
 * Differences of positions a stride apart to either side: exact for a parabola, also on uneven times. Positions stay as measured;
 * within a stride of the ends there is no value.
 */
export const centralDifference: PrescribedMethod = {
  name: 'centralDifference',
  with(settings): MethodWithSettings | null {
    if (settings.method !== 'centralDifference') return null;
    const { strideFrames } = settings;
    return {
      description: `central differences over ${strideFrames} ${strideFrames === 1 ? 'frame' : 'frames'} to either side`,
      rateProblem: () => null,
      needsEvenTimes: false,
      smoother: ({ timeS, uM }) =>
        timeS.length < 2 * strideFrames + 1 ? null : differences(timeS, uM, strideFrames),
    };
  },
};

function differences(timeS: Float64Array, uM: Float64Array, stride: number): LinearSmoother {
  const n = timeS.length;
  const mostHz = 0.5 / medianStepS(timeS);
  const rows = Array.from({ length: n }, (_, i) =>
    i < stride || i >= n - stride ? null : threePointRows(timeS, i, stride),
  );
  return {
    apply: (values) => byRows(rows, (row) => weightedSum(row, values)),
    uNoise: byRows(rows, (row) => uOfSum(row, uM)),
    bandwidthHz: Float64Array.from(rows, (row, i) =>
      row
        ? responseBandwidth(row.acceleration.weights, offsets(timeS, row.acceleration, i), mostHz)
        : Number.NaN,
    ),
    settings: { strideFrames: stride },
  };
}

/** The parabola through three points: Lagrange's weights of its derivatives at the middle one. */
function threePointRows(timeS: Float64Array, i: number, stride: number): InstantRows {
  const before = timeS[i] - timeS[i - stride];
  const after = timeS[i + stride] - timeS[i];
  const whole = before + after;
  const row = (first: number, middle: number, last: number): Row => {
    const weights = new Float64Array(2 * stride + 1);
    weights[0] = first;
    weights[stride] = middle;
    weights[2 * stride] = last;
    return { from: i - stride, weights };
  };
  return {
    position: row(0, 1, 0),
    velocity: row(-after / (before * whole), (after - before) / (before * after), before / (after * whole)),
    acceleration: row(2 / (before * whole), -2 / (before * after), 2 / (after * whole)),
    jerk: null,
  };
}

function offsets(timeS: Float64Array, { from, weights }: Row, i: number): Float64Array {
  return Float64Array.from(weights, (_, k) => timeS[from + k] - timeS[i]);
}
