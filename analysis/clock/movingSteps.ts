import type { FallingTrack } from '../gravity/mainFall.ts';
import type { Finding } from '../sheet/result.ts';
import { placesText } from './stepTimes.ts';

/** A step of a body between neighbouring frames that does not fit the steps on both sides of it. */
export interface StepFault {
  /** The later of the two frames. */
  readonly frame: number;
  /** How many usual steps the body went. */
  readonly steps: number;
  readonly kind: 'missing' | 'doubled' | 'uneven';
}

/** Steps on either side that a step is held against. */
const sideSteps = 6;
const leastSideSteps = 4;
/** A step is odd when it is off by this many of its standard uncertainties and by this share. */
const oddSigma = 6;
const oddShare = 0.3;
/** Two lines of six points, each carried on by one step: their difference is 1.3 times as uncertain as a step; four of that. */
const sidesSigma = 5;

/**
 * Frames that were dropped, doubled or mistimed, from a body that moves smoothly: its speed from frame to frame follows a line
 * before and after, and both lines meet; one step that is off both is a fault of the clock, not of the body. A landing, where
 * the two sides do not meet, is none. Seen only where the body moves by more than its noise from frame to frame.
 *
 * @param track  in the order of frames; steps over frames that are left out are passed over
 */
export function stepFaults({ frame, timeS, yM, uYM }: FallingTrack): StepFault[] {
  const speed: Step[] = [];
  for (let i = 1; i < frame.length; i++) {
    if (frame[i] !== frame[i - 1] + 1) continue;
    const stepS = timeS[i] - timeS[i - 1];
    speed.push({
      frame: frame[i],
      atS: (timeS[i] + timeS[i - 1]) / 2,
      mps: (yM[i - 1] - yM[i]) / stepS,
      uMps: Math.hypot(uYM[i], uYM[i - 1]) / stepS,
    });
  }
  // The worst first: a fault that is known no longer bends the lines by which its neighbours are judged.
  const faults = new Map<number, StepFault>();
  for (;;) {
    const odd = speed
      .map((_, i) => (faults.has(i) ? null : oddStep(speed, i, faults)))
      .reduce((worst, o) => (o !== null && (worst === null || o.excess > worst.excess) ? o : worst), null);
    if (odd === null) return [...faults.values()].sort((p, q) => p.frame - q.frame);
    faults.set(odd.place, odd.fault);
  }
}

interface Step {
  readonly frame: number;
  readonly atS: number;
  readonly mps: number;
  readonly uMps: number;
}

/** The step at a place, if it is off those on both its sides; steps known to be faults are passed over. */
function oddStep(
  speed: readonly Step[],
  place: number,
  known: ReadonlyMap<number, StepFault>,
): { readonly place: number; readonly excess: number; readonly fault: StepFault } | null {
  const before: Step[] = [];
  const after: Step[] = [];
  for (let i = place - 1; i >= 0 && before.length < sideSteps; i--) if (!known.has(i)) before.push(speed[i]);
  for (let i = place + 1; i < speed.length && after.length < sideSteps; i++) {
    if (!known.has(i)) after.push(speed[i]);
  }
  if (before.length < leastSideSteps || after.length < leastSideSteps) return null;
  const step = speed[place];
  const left = lineThrough(before, step.atS);
  const right = lineThrough(after, step.atS);
  const usual = (left.mps + right.mps) / 2;
  const noise = Math.max(step.uMps, left.scatterMps, right.scatterMps);
  // A body that hardly moves from frame to frame tells nothing of the time between them.
  if (Math.abs(usual) < oddSigma * noise) return null;
  const tolerance = Math.max(oddSigma * noise, oddShare * Math.abs(usual));
  // The two sides must tell of the same motion.
  if (Math.abs(left.mps - right.mps) > Math.max(0.1 * Math.abs(usual), sidesSigma * noise)) return null;
  const excess = Math.abs(step.mps - usual) / tolerance;
  if (excess <= 1) return null;
  const steps = step.mps / usual;
  // Whole numbers of steps are told from others as well as the noise lets them be.
  const whole = Math.abs(steps - Math.round(steps)) < Math.min(0.45, 0.25 + (3 * noise) / Math.abs(usual));
  const kind = whole && steps > 1.5 ? 'missing' : whole && Math.round(steps) === 0 ? 'doubled' : 'uneven';
  return { place, excess, fault: { frame: step.frame, steps, kind } };
}

/** What the faults mean for the times, with the frames where they are. */
export function stepFaultFindings(faults: readonly StepFault[]): Finding[] {
  const of = (kind: StepFault['kind']) => faults.filter((f) => f.kind === kind).map((f) => f.frame);
  const text: Record<StepFault['kind'], (frames: readonly number[]) => string> = {
    missing: (frames) =>
      `The reference body goes on by two steps or more at once between ${placesText(frames)}: frames are missing there (dropped by the camera or by a conversion), and the times after them are too early. Reduce the frames on one side only, or state the frames' own times.`,
    doubled: (frames) =>
      `The reference body stands still between ${placesText(frames)} although it moves before and after: those frames are copies, and the times after them may be too late. Reduce the frames on one side only, or state the frames' own times.`,
    uneven: (frames) =>
      `The reference body's step between ${placesText(frames)} fits neither those before nor those after: the time between these frames is not what the clock says.`,
  };
  return (['missing', 'doubled', 'uneven'] as const).flatMap((kind): Finding[] => {
    const frames = of(kind);
    if (frames.length === 0) return [];
    return [
      { level: 'caution', code: `steps${kind[0].toUpperCase()}${kind.slice(1)}`, text: text[kind](frames) },
    ];
  });
}

/** A line through speeds by median slope (Theil 1950, Sen 1968), carried on to an instant: another fault nearby does not bend it. */
function lineThrough(
  speeds: readonly { readonly atS: number; readonly mps: number }[],
  atS: number,
): { mps: number; scatterMps: number } {
  const slopes: number[] = [];
  for (let i = 1; i < speeds.length; i++) {
    for (let j = 0; j < i; j++) {
      slopes.push((speeds[i].mps - speeds[j].mps) / (speeds[i].atS - speeds[j].atS));
    }
  }
  const slope = medianOf(slopes);
  const levels = speeds.map((s) => s.mps - slope * (s.atS - atS));
  const mps = medianOf(levels);
  // 1.4826: from the median of absolute deviations to the standard deviation of a normal scatter
  return { mps, scatterMps: 1.4826 * medianOf(levels.map((l) => Math.abs(l - mps))) };
}

function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const half = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}
