import { adaptive } from '../../../analysis/motion/adaptive.ts';
import type { Piece } from '../../../analysis/motion/method.ts';
import { quinticSpline } from '../../../analysis/motion/prescribed/quinticSpline.ts';
import { seededRandom } from '../../../fixtures/random.ts';
import { averagedTruth } from './averagedTruth.ts';
import type { MotionTruth } from './truths.ts';
import { bestFixed, honestOracle, windowErrors } from './windows.ts';

/** How errors of the positions are made, and what is said of them. */
export interface Errors {
  readonly uM: number;
  /** Correlation from frame to frame. */
  readonly lagOne: number;
  /** Stated over true standard uncertainty. */
  readonly stated: number;
}

/** Root-mean-square errors of one quantity, in the core and over the whole record. */
interface Rms {
  readonly core: number;
  readonly whole: number;
}

interface Covered {
  readonly all: number;
  readonly peak: number;
  readonly ends: number;
}

/** One truth at one frame rate and noise. */
export interface Cell {
  readonly points: number;
  readonly acceleration: {
    readonly own: Rms;
    readonly oracle: Rms;
    readonly fixed: Rms;
    readonly spline: Rms;
  };
  readonly velocity: { readonly own: Rms; readonly oracle: Rms; readonly fixed: Rms };
  readonly covered: {
    readonly position: Covered;
    readonly velocity: Covered;
    readonly acceleration: Covered;
  };
  /** Mean and scatter of the error of the greatest acceleration, relative; null where the record has no peak. */
  readonly peak: { readonly bias: number; readonly scatter: number } | null;
  readonly noiseFound: number;
  readonly ms: number;
}

/** Share of the record at each end that is not core, at least five frames. */
const endShare = 0.015;
const mostInstants = 120;
const factor95 = 1.96;

export function benchCell(
  truth: MotionTruth,
  rateHz: number,
  errors: Errors,
  runs: number,
  withSpline: boolean,
): Cell {
  const n = Math.floor(truth.endS * rateHz) + 1;
  const timeS = Float64Array.from({ length: n }, (_, i) => i / rateHz);
  const exact = Array.from(timeS, (t) => truth.at(t));
  const yM = Float64Array.from(exact, (e) => e.yM);
  const series = [yM, Float64Array.from(exact, (e) => e.vMps), Float64Array.from(exact, (e) => e.aMps2)];
  const end = Math.max(5, Math.ceil(endShare * n));
  const isCore = (i: number) => i >= end && i < n - end;
  const nearPeak = (i: number) =>
    truth.peakS !== null && Math.abs(timeS[i] - truth.peakS) <= truth.halfWidthS;

  const tallies = series.map(() => ({ core: 0, whole: 0, held: { all: 0, peak: 0, ends: 0 } }));
  const spline = { core: 0, whole: 0 };
  const peaks: number[] = [];
  let ms = 0;
  let noiseFound = 0;
  const of = { all: n, peak: timeS.filter((_, i) => nearPeak(i)).length, ends: 2 * end };
  for (let run = 1; run <= runs; run++) {
    const noise = noiseSeries(n, errors, 1000 * run + n);
    const piece: Piece = {
      timeS,
      valueM: yM.map((y, i) => y + noise[i]),
      uM: new Float64Array(n).fill(errors.uM * errors.stated),
      restUntil: null,
    };
    const before = performance.now();
    const smoothed = adaptive.smooth(piece);
    ms += performance.now() - before;
    noiseFound += Number(smoothed.settings.noiseOverStated) * errors.stated;
    const curves = [smoothed.position, smoothed.velocity, smoothed.acceleration];
    const meant = truth.ripples ? averagedTruth(piece, yM) : series;
    curves.forEach(({ value, u }, q) => {
      const tally = tallies[q];
      for (let i = 0; i < n; i++) {
        const e2 = (value[i] - series[q][i]) ** 2;
        tally.whole += e2;
        if (isCore(i)) tally.core += e2;
        if (Math.abs(value[i] - meant[q][i]) > factor95 * u[i]) continue;
        tally.held.all++;
        if (nearPeak(i)) tally.held.peak++;
        if (!isCore(i)) tally.held.ends++;
      }
    });
    if (truth.peakS !== null) {
      peaks.push(greatest(smoothed.acceleration.value, nearPeak) / truth.at(truth.peakS).aMps2 - 1);
    }
    const rival = withSpline
      ? quinticSpline.with({ method: 'quinticSpline' })?.smoother(piece, smoothed)
      : null;
    if (rival) {
      const { acceleration } = rival.apply(piece.valueM);
      for (let i = 0; i < n; i++) {
        const e2 = (acceleration[i] - series[2][i]) ** 2;
        spline.whole += e2;
        if (isCore(i)) spline.core += e2;
      }
    }
  }
  const rms = (t: { core: number; whole: number }): Rms => ({
    core: Math.sqrt(t.core / (runs * (n - 2 * end))),
    whole: Math.sqrt(t.whole / (runs * n)),
  });
  const covered = (q: number): Covered => ({
    all: tallies[q].held.all / (runs * of.all),
    peak: tallies[q].held.peak / (runs * of.peak),
    ends: tallies[q].held.ends / (runs * of.ends),
  });
  // Correlated errors count in the bounds as white ones with the same part at low frequency.
  const uBound = errors.uM * Math.sqrt((1 + errors.lagOne) / (1 - errors.lagOne));
  const bounds = [1, 2].map((d) => boundsOf(yM, series[d], uBound, 1 / rateHz, d, isCore));
  const mean = peaks.reduce((sum, p) => sum + p, 0) / peaks.length;
  return {
    points: n,
    acceleration: { own: rms(tallies[2]), ...bounds[1], spline: rms(spline) },
    velocity: { own: rms(tallies[1]), ...bounds[0] },
    covered: { position: covered(0), velocity: covered(1), acceleration: covered(2) },
    peak:
      peaks.length > 1
        ? {
            bias: mean,
            scatter: Math.sqrt(peaks.reduce((sum, p) => sum + (p - mean) ** 2, 0) / (peaks.length - 1)),
          }
        : null,
    noiseFound: noiseFound / runs,
    ms: ms / runs,
  };
}

/** First-order autoregression of the stated spread. */
function noiseSeries(n: number, { uM, lagOne }: Errors, seed: number): Float64Array {
  const random = seededRandom(seed);
  let last = random.gaussian();
  const fresh = Math.sqrt(1 - lagOne * lagOne);
  return Float64Array.from({ length: n }, () => {
    const now = uM * last;
    last = lagOne * last + fresh * random.gaussian();
    return now;
  });
}

function greatest(values: Float64Array, counts: (i: number) => boolean): number {
  return values.reduce((most, v, i) => (counts(i) && v > most ? v : most), Number.NEGATIVE_INFINITY);
}

function boundsOf(
  yM: Float64Array,
  truth: Float64Array,
  uM: number,
  stepS: number,
  derivative: number,
  isCore: (i: number) => boolean,
): { oracle: Rms; fixed: Rms } {
  const n = yM.length;
  const stride = Math.max(1, Math.round(n / mostInstants));
  // All of the ends, where errors are greatest, and every so many of the rest: each counts for as many as it stands for.
  const instants = Array.from({ length: n }, (_, i) => i).filter((i) => !isCore(i) || i % stride === 0);
  const core = instants.map(isCore);
  const errors = [2, 3, 4, 5].map((d) => windowErrors(yM, truth, uM, stepS, d, derivative, instants));
  const squares = honestOracle(errors.filter((e) => e.degree >= 4));
  const mean = (counts: (k: number) => number) => {
    let [sum, weight] = [0, 0];
    squares.forEach((s, k) => {
      sum += counts(k) * s;
      weight += counts(k);
    });
    return Math.sqrt(sum / weight);
  };
  return {
    oracle: { core: mean((k) => Number(core[k])), whole: mean((k) => (core[k] ? stride : 1)) },
    fixed: {
      core: bestFixed(
        errors,
        core.map((c) => (c ? 1 : 0)),
      ),
      whole: bestFixed(
        errors,
        core.map((c) => (c ? stride : 1)),
      ),
    },
  };
}
