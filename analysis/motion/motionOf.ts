import type { Motion } from '../sheet/result.ts';
import { type AdaptiveDerivatives, adaptiveDerivatives, type Estimate } from './adaptiveDerivatives.ts';
import { accelerationBandwidth } from './bandwidth.ts';
import type { Segment } from './localPolynomial.ts';
import { inflation } from './residuals.ts';
import type { WorldTrack } from './worldTrack.ts';

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
  const bandwidthFor = rememberedBandwidth(frameTimeS);

  for (const segment of segmentsOf(track.timeS, breaksS)) {
    const down = adaptiveDerivatives(track.timeS, track.yM, track.uYM, segment);
    const across = adaptiveDerivatives(track.timeS, track.xM, track.uXM, segment);
    take(segment, down, track.yM, track.uYM, [series.y, series.vy, series.ay], [u.y, u.vy, u.ay]);
    take(segment, across, track.xM, track.uXM, [series.x, series.vx, series.ax], [u.x, u.vx, u.ax]);
    for (let i = segment.from; i < segment.to; i++) {
      halfWindowS[i] = down.acceleration.halfWindowS[i];
      bandwidthHz[i] = bandwidthFor(halfWindowS[i], down.acceleration.degree[i]);
    }
  }

  const known = Array.from(track.timeS.keys()).filter(
    (i) => Number.isFinite(series.ay[i]) && Number.isFinite(series.ax[i]),
  );
  const pick = (values: Float64Array) => known.map((i) => values[i]);
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
      method:
        'local polynomial of degree 2 or 4; degree and half-window chosen at each instant, for each of position, velocity and acceleration, for the least estimated error',
      settings: {
        /** Of the acceleration along the plumb line. */
        halfWindowS: pick(halfWindowS),
        bandwidthHz: pick(bandwidthHz),
        breaksS: [...breaksS],
      },
    },
    halfWindowS: Float64Array.from(pick(halfWindowS)),
    bandwidthHz: Float64Array.from(pick(bandwidthHz)),
  };
}

/** The bandwidth of each window is worked out once; never more than half the frame rate. */
function rememberedBandwidth(frameTimeS: number): (halfWindowS: number, degree: number) => number {
  const known = new Map<string, number>();
  return (halfWindowS, degree) => {
    if (Number.isNaN(halfWindowS)) return Number.NaN;
    const key = `${halfWindowS} ${degree}`;
    const hz =
      known.get(key) ?? Math.min(accelerationBandwidth(halfWindowS, frameTimeS, degree), 0.5 / frameTimeS);
    known.set(key, hz);
    return hz;
  };
}

function take(
  segment: Segment,
  d: AdaptiveDerivatives,
  measured: Float64Array,
  uMeasured: Float64Array,
  values: readonly [Float64Array, Float64Array, Float64Array],
  us: readonly [Float64Array, Float64Array, Float64Array],
): void {
  const standardised = new Float64Array(measured.length).fill(Number.NaN);
  for (let i = segment.from; i < segment.to; i++) {
    if (d.leverage[i] < 0.9) {
      standardised[i] = (measured[i] - d.position.value[i]) / (uMeasured[i] * Math.sqrt(1 - d.leverage[i]));
    }
  }
  const wider = inflation(standardised, segment.from, segment.to);
  [d.position, d.velocity, d.acceleration].forEach((estimate: Estimate, q) => {
    for (let i = segment.from; i < segment.to; i++) {
      values[q][i] = estimate.value[i];
      us[q][i] = Math.hypot(wider * estimate.uNoise[i], estimate.uBias[i]);
    }
  });
}
