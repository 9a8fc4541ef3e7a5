import type { Common, WorldTrack } from '../motion/worldTrack.ts';
import type { Sheet } from '../sheet/sheet.ts';
import type { ForceRecord } from '../theory/force/parseForceRecord.ts';
import type { LocalGravity } from '../theory/normalGravity.ts';

export interface NumbersInput {
  readonly tracks: readonly WorldTrack[];
  readonly common: Common;
  readonly gravity: LocalGravity;
  readonly sheet: Sheet;
  /** The load cell's record where the sheet names one. */
  readonly forceRecord?: ForceRecord | null;
}
