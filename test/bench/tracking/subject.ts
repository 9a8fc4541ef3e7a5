import type { Sheet } from '../../../analysis/sheet/sheet.ts';
import type { Picture } from '../../../analysis/track/track.ts';
import type { AxisVariances } from './bound.ts';

/** Which goal of accuracy a body's row counts for. */
export type GoalName = 'plain' | 'textured' | 'blurred' | 'faint' | 'coded';

/** A body in a film, with its true places and the bound of its position. */
export interface FilmedBody {
  readonly id: string;
  /** Null: followed and listed, but no goal is set for it. */
  readonly goal: GoalName | null;
  readonly xPx: readonly number[] | Float64Array;
  readonly yPx: readonly number[] | Float64Array;
  /** Cramér-Rao bound, mean over instants of the motion [px²]. */
  readonly bound: AxisVariances;
}

/** A film in memory with what the bench needs to follow its bodies and to judge how well that was done. */
export interface Subject {
  readonly name: string;
  readonly pictures: readonly Picture[];
  readonly sheet: Sheet;
  readonly bodies: readonly FilmedBody[];
  /** First frame in which the bodies move, and the last frame before extension. */
  readonly movesFrom: number;
  readonly extendsAt: number;
}
