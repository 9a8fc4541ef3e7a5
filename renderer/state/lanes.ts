import { computed, effect, signal } from '@preact/signals';
import type { Motion, Theory } from '../../analysis/sheet/result.ts';
import { frameNumber, goToFrame } from './frames.ts';
import { letterOfBody } from './marks.ts';
import { reduction, resultFrame, roleOf } from './reduction.ts';

type LaneName = 'position' | 'velocity' | 'acceleration';
export type Axis = 'y' | 'x';

export interface Trace {
  readonly id: string;
  readonly letter: string;
  readonly role: string;
  readonly timeS: readonly number[];
  /** The smooth curve, and its standard uncertainty. */
  readonly value: readonly number[];
  readonly u: readonly number[];
  /** Measured points: positions as tracked; for velocity and acceleration their plain differences. */
  readonly points: readonly { readonly timeS: number; readonly value: number }[];
}

interface TheoryTrace {
  readonly model: Theory['model'];
  readonly body: string;
  readonly role: string;
  readonly timeS: readonly number[];
  readonly value: readonly number[];
}

export interface LaneData {
  readonly name: LaneName;
  readonly unit: string;
  readonly traces: readonly Trace[];
  readonly theory: readonly TheoryTrace[];
}

/** Vertical motion is what the theory speaks of; the other is there to look at. */
export const axis = signal<Axis>('y');
/** Models that the technician does not want to see. */
export const hiddenModels = signal<ReadonlySet<string>>(new Set());
/** The stretch of time that is shown [s]; null for all. */
export const zoomedTo = signal<{ readonly fromS: number; readonly toS: number } | null>(null);

const order: readonly LaneName[] = ['position', 'velocity', 'acceleration'];
const units: Readonly<Record<LaneName, string>> = { position: 'm', velocity: 'm/s', acceleration: 'm/s²' };
const fields = {
  y: { position: ['yM', 'uYM'], velocity: ['vyMps', 'uVyMps'], acceleration: ['ayMps2', 'uAyMps2'] },
  x: { position: ['xM', 'uXM'], velocity: ['vxMps', 'uVxMps'], acceleration: ['axMps2', 'uAxMps2'] },
} as const;
const theoryFields = { position: 'yM', velocity: 'vyMps', acceleration: 'ayMps2' } as const;

export const lanes = computed<readonly LaneData[]>(() => {
  const result = reduction.value?.result;
  if (!result) return [];
  const bodies = Object.entries(result.motion).filter(([id]) => roleOf(id) !== 'other');
  return order.map((name) => ({
    name,
    unit: units[name],
    traces: bodies.map(([id, motion]) => traceOf(id, motion, name, axis.value)),
    theory:
      axis.value === 'x'
        ? []
        : result.theory
            .filter((t) => !hiddenModels.value.has(t.model))
            .map((t) => ({
              model: t.model,
              body: t.body,
              role: roleOf(t.body),
              timeS: t.curve.timeS,
              value: t.curve[theoryFields[name]],
            })),
  }));
});

function traceOf(id: string, motion: Motion, name: LaneName, along: Axis): Trace {
  const [value, u] = fields[along][name];
  const measured = along === 'y' ? motion.measuredYM : motion.measuredXM;
  return {
    id,
    letter: letterOfBody(id),
    role: roleOf(id),
    timeS: motion.timeS,
    value: motion[value],
    u: motion[u],
    points: pointsOf(motion.timeS, measured, name),
  };
}

/** Differences over neighbours: what the measured positions say by themselves, noise and all. */
function pointsOf(timeS: readonly number[], measuredM: readonly number[], name: LaneName): Trace['points'] {
  if (name === 'position') return measuredM.map((value, i) => ({ timeS: timeS[i] ?? Number.NaN, value }));
  const points: { timeS: number; value: number }[] = [];
  for (let i = 1; i + 1 < measuredM.length; i++) {
    const [t0, t1, t2] = [timeS[i - 1] ?? 0, timeS[i] ?? 0, timeS[i + 1] ?? 0];
    const before = ((measuredM[i] ?? 0) - (measuredM[i - 1] ?? 0)) / (t1 - t0);
    const after = ((measuredM[i + 1] ?? 0) - (measuredM[i] ?? 0)) / (t2 - t1);
    const value =
      name === 'velocity'
        ? (before * (t2 - t1) + after * (t1 - t0)) / (t2 - t0)
        : (2 * (after - before)) / (t2 - t0);
    points.push({ timeS: t1, value });
  }
  return points;
}

/** First and last time of the frames that were reduced [s]. */
const wholeTime = computed(() => {
  const frames = reduction.value?.result.frames ?? [];
  const first = frames[0]?.timeS ?? 0;
  return { fromS: first, toS: frames.at(-1)?.timeS ?? first + 1 };
});

/** A stretch of another drop's time, or by another clock, means nothing here. */
let zoomedIn = '';
effect(() => {
  if (!reduction.value) return;
  const { fromS, toS } = wholeTime.value;
  const of = `${reduction.value.result.inputs.footageSha256} ${fromS} ${toS}`;
  if (of !== zoomedIn) zoomedTo.value = null;
  zoomedIn = of;
});

export const shownTime = computed(() => zoomedTo.value ?? wholeTime.value);

/** Time of the cursor [s]; null when the frame that is shown was not reduced. */
export const cursorS = computed(() => resultFrame.value?.timeS ?? null);

export function goToTime(timeS: number): void {
  const frames = reduction.value?.result.frames ?? [];
  let nearest = frames[0];
  for (const frame of frames)
    if (nearest && Math.abs(frame.timeS - timeS) < Math.abs(nearest.timeS - timeS)) nearest = frame;
  if (nearest) {
    goToFrame(nearest.n);
    // Without its footage a reduction still has its frames.
    if (frameNumber.value !== nearest.n) frameNumber.value = nearest.n;
  }
}

export function zoomTo(aS: number, bS: number): void {
  const { fromS, toS } = wholeTime.value;
  const from = Math.max(Math.min(aS, bS), fromS);
  const to = Math.min(Math.max(aS, bS), toS);
  const step = (toS - fromS) / Math.max(1, (reduction.value?.result.frames.length ?? 2) - 1);
  if (to - from < 3 * step) return; // fewer frames than a curve needs
  zoomedTo.value = from <= fromS && to >= toS ? null : { fromS: from, toS: to };
}

/** Narrows (factor < 1) or widens the shown time around the cursor. */
export function zoomTimeBy(factor: number): void {
  const { fromS, toS } = shownTime.value;
  const centre = Math.min(Math.max(cursorS.value ?? (fromS + toS) / 2, fromS), toS);
  zoomTo(centre - (centre - fromS) * factor, centre + (toS - centre) * factor);
}
