import type { Motion } from '../sheet/result.ts';
import { accelerationBandwidth } from './bandwidth.ts';
import { type ChosenWindows, chooseWindows } from './chooseWindows.ts';
import { type Derivatives, localPolynomial } from './localPolynomial.ts';
import { inflation } from './residuals.ts';
import type { WorldTrack } from './worldTrack.ts';

/** Degree of the local polynomial: acceleration and its change are both free within a window. */
const degree = 4;

/** A run of points that no break parts. */
export interface Segment {
  readonly from: number;
  readonly to: number;
}

/** Motion with the windows it was worked out with, point by point. */
export interface MotionWithWindows {
  readonly motion: Motion;
  readonly halfWindowS: Float64Array;
  /** Bandwidth of the acceleration at each point [Hz]. */
  readonly bandwidthHz: Float64Array;
}

/** Parts a record at its breaks (release, extension): no window crosses a kink. */
export function segmentsOf(timeS: Float64Array, breaksS: readonly number[]): Segment[] {
  const edges = [...breaksS].sort((a, b) => a - b).map((b) => timeS.findIndex((t) => t >= b));
  const starts = [0, ...edges.filter((e) => e > 0), timeS.length];
  return starts.slice(1).flatMap((to, i) => (to > starts[i] ? [{ from: starts[i], to }] : []));
}

/**
 * Position, velocity and acceleration of a body against time, each with its standard uncertainty: noise of the positions,
 * widened where the residuals scatter or hang together more than stated, and the estimated bias of smoothing.
 *
 * Only what varies from frame to frame is in these uncertainties; scale and clock are common to all points and are in the
 * budgets of the key values.
 *
 * @param breaksS  times that no window may cross [s]
 */
export function motionOf(
  track: WorldTrack,
  breaksS: readonly number[],
  frameTimeS: number,
): MotionWithWindows {
  const n = track.timeS.length;
  const blank = () => new Float64Array(n).fill(Number.NaN);
  const series = { x: blank(), vx: blank(), ax: blank(), y: blank(), vy: blank(), ay: blank() };
  const u = { x: blank(), vx: blank(), ax: blank(), y: blank(), vy: blank(), ay: blank() };
  const halfWindowS = blank();
  const bandwidthHz = blank();
  const bandwidths = new Map<number, number>();

  for (const segment of segmentsOf(track.timeS, breaksS)) {
    const down = chooseWindows(track.timeS, track.yM, track.uYM, degree, segment);
    const across = chooseWindows(track.timeS, track.xM, track.uXM, degree, segment);
    const dy = localPolynomial(track.timeS, track.yM, track.uYM, down.halfWindowS, degree, segment);
    const dx = localPolynomial(track.timeS, track.xM, track.uXM, across.halfWindowS, degree, segment);
    take(segment, dy, down, track.yM, track.uYM, [series.y, series.vy, series.ay], [u.y, u.vy, u.ay]);
    take(segment, dx, across, track.xM, track.uXM, [series.x, series.vx, series.ax], [u.x, u.vx, u.ax]);
    for (let i = segment.from; i < segment.to; i++) {
      const half = down.halfWindowS[i];
      halfWindowS[i] = half;
      if (Number.isNaN(half)) continue;
      let hz = bandwidths.get(half);
      if (hz === undefined) {
        hz = accelerationBandwidth(half, frameTimeS, degree);
        bandwidths.set(half, hz);
      }
      bandwidthHz[i] = hz;
    }
  }

  const known = Array.from(track.timeS.keys()).filter(
    (i) => Number.isFinite(series.ay[i]) && Number.isFinite(series.ax[i]),
  );
  const pick = (values: Float64Array) => known.map((i) => values[i]);
  const windowsMs = pick(halfWindowS).map((h) => h * 1000);
  return {
    motion: {
      timeS: pick(track.timeS),
      xM: pick(series.x),
      yM: pick(series.y),
      vxMps: pick(series.vx),
      vyMps: pick(series.vy),
      axMps2: pick(series.ax),
      ayMps2: pick(series.ay),
      uXM: pick(u.x),
      uYM: pick(u.y),
      uVxMps: pick(u.vx),
      uVyMps: pick(u.vy),
      uAxMps2: pick(u.ax),
      uAyMps2: pick(u.ay),
      measuredXM: pick(track.xM),
      measuredYM: pick(track.yM),
      method: `local polynomial of degree ${degree}, half-window chosen at each instant for the least estimated error of acceleration`,
      settings: {
        degree,
        leastHalfWindowMs: known.length > 0 ? Math.min(...windowsMs) : 0,
        greatestHalfWindowMs: known.length > 0 ? Math.max(...windowsMs) : 0,
        halfWindowS: pick(halfWindowS),
        bandwidthHz: pick(bandwidthHz).map((hz) => Math.min(hz, 0.5 / frameTimeS)),
        breaksS: [...breaksS],
      },
    },
    halfWindowS: Float64Array.from(pick(halfWindowS)),
    bandwidthHz: Float64Array.from(pick(bandwidthHz)),
  };
}

function take(
  segment: Segment,
  d: Derivatives,
  windows: ChosenWindows,
  measured: Float64Array,
  uMeasured: Float64Array,
  [p, v, a]: [Float64Array, Float64Array, Float64Array],
  [uP, uV, uA]: [Float64Array, Float64Array, Float64Array],
): void {
  const standardised = new Float64Array(measured.length).fill(Number.NaN);
  for (let i = segment.from; i < segment.to; i++) {
    if (d.leverage[i] < 0.9) {
      standardised[i] = (measured[i] - d.position[i]) / (uMeasured[i] * Math.sqrt(1 - d.leverage[i]));
    }
  }
  const wider = inflation(standardised, segment.from, segment.to);
  for (let i = segment.from; i < segment.to; i++) {
    p[i] = d.position[i];
    v[i] = d.velocity[i];
    a[i] = d.acceleration[i];
    uP[i] = Math.hypot(wider * d.uPosition[i], windows.biasPosition[i]);
    uV[i] = Math.hypot(wider * d.uVelocity[i], windows.biasVelocity[i]);
    uA[i] = Math.hypot(wider * d.uAcceleration[i], windows.biasAcceleration[i]);
  }
}
