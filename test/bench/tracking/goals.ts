import type { Drift } from './drift.ts';
import type { PhaseSweep } from './phaseSweep.ts';
import type { Row } from './rowsOf.ts';

export interface Measured {
  readonly rows: readonly Row[];
  readonly sweeps: readonly PhaseSweep[];
  readonly drifts: readonly Drift[];
}

/** What is asked of the tracker, and what it does. */
export interface Goal {
  readonly text: string;
  readonly reached: boolean;
  /** The worst figure and where it was met, and how many of all kept the goal. */
  readonly figure: string;
}

interface Figure {
  readonly value: number;
  readonly where: string;
}

/** Patches of the size for which the time of refinement is set [px]. */
const refinedPatchPx = 31;

/** Every goal for which something was measured. */
export function goalsOf({ rows, sweeps, drifts }: Measured): Goal[] {
  const of = (goal: Row['goal']) => rows.filter((r) => r.goal === goal);
  const named = (r: Row) => `${r.name}, ${r.body}`;
  const multiples = (goal: Row['goal']) =>
    of(goal).flatMap((r) => [
      { value: r.multipleX, where: `${named(r)} x` },
      { value: r.multipleY, where: `${named(r)} y` },
    ]);
  const errors = of('coded').flatMap((r) => [
    { value: r.rmsX, where: `${named(r)} x` },
    { value: r.rmsY, where: `${named(r)} y` },
  ]);
  const locking = sweeps.flatMap((s) => [
    { value: s.halfAmplitudeX, where: `${s.name} x` },
    { value: s.halfAmplitudeY, where: `${s.name} y` },
  ]);
  const drifting = drifts.flatMap((d) => [
    { value: Math.abs(d.xPer1000), where: `${d.name} x` },
    { value: Math.abs(d.yPer1000), where: `${d.name} y` },
  ]);
  const lost = rows.map((r) => ({ value: r.lost, where: named(r) }));
  const refining = rows
    .filter((r) => r.patchPx <= refinedPatchPx)
    .map((r) => ({ value: r.refiningMs, where: `${named(r)}, patch ${r.patchPx} px` }));
  return [
    most('Plain board, noise: at most 1.1 × the bound', multiples('plain'), 1.1, 2, '×'),
    most('Textured board, noise: at most 1.2 × the bound', multiples('textured'), 1.2, 2, '×'),
    most('Blur of up to 8 px: at most 1.2 × the bound', multiples('blurred'), 1.2, 2, '×'),
    most('Faint body: at most 1.3 × the bound', multiples('faint'), 1.3, 2, '×'),
    most('H.264 at 0.2 bit per pixel: RMS at most 0.025 px', errors, 0.025, 4, 'px'),
    most('Pixel locking: half-amplitude at most 0.002 px', locking, 0.002, 4, 'px'),
    most('Drift: at most 0.003 px per 1000 frames', drifting, 0.003, 4, 'px'),
    most('No frame lost before extension', lost, 0, 0, 'frames'),
    most(`Refinement, patch up to ${refinedPatchPx} px: at most 0.06 ms`, refining, 0.06, 3, 'ms'),
    ...coverageGoal(rows),
  ].filter((g) => g !== null);
}

function most(
  text: string,
  figures: readonly Figure[],
  limit: number,
  digits: number,
  unit: string,
): Goal | null {
  if (figures.length === 0) return null;
  // A figure that is not a number is no figure within the limit.
  const kept = figures.filter((f) => f.value <= limit).length;
  const worst = figures.reduce((w, f) => (f.value <= w.value ? w : f));
  const sorted = figures.map((f) => f.value).sort((a, b) => a - b);
  const middle = (sorted[(sorted.length - 1) >> 1] + sorted[sorted.length >> 1]) / 2;
  return {
    text,
    reached: kept === figures.length,
    figure: `worst ${worst.value.toFixed(digits)} ${unit} (${worst.where}), median ${middle.toFixed(digits)} ${unit}, ${kept} of ${figures.length} within`,
  };
}

/** Over all films, as the goal is set; and how far single films are from it. */
function coverageGoal(rows: readonly Row[]): Goal[] {
  if (rows.length === 0) return [];
  const frames = rows.reduce((s, r) => s + r.frames, 0);
  const share = rows.reduce((s, r) => s + r.frames * r.coverage, 0) / frames;
  const within = (c: number) => c >= 0.92 && c <= 0.98;
  const sorted = [...rows].sort((a, b) => a.coverage - b.coverage);
  const percent = (c: number) => `${(100 * c).toFixed(1)} %`;
  const [least, greatest] = [sorted[0], sorted[sorted.length - 1]];
  return [
    {
      text: '95 % intervals hold in 92 to 98 % of the frames, in every film',
      reached: rows.every((r) => within(r.coverage)),
      figure: `all films together ${percent(share)}, least ${percent(least.coverage)} (${least.name}, ${least.body}), greatest ${percent(greatest.coverage)} (${greatest.name}, ${greatest.body}), ${rows.filter((r) => within(r.coverage)).length} of ${rows.length} within`,
    },
  ];
}
