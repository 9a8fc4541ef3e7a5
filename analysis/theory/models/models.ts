import {
  foldedTetherEndWeight,
  foldedTetherEnergy,
  foldedTetherMomentum,
  foldedTetherShare,
} from './foldedTether.ts';
import { freeFall } from './freeFall.ts';
import { withDrag } from './freeFallDrag.ts';
import type { Model } from './model.ts';

/** The models, in the order in which they are shown. A new one is one more file and one more line. */
export const models: readonly Model[] = [
  freeFall,
  withDrag,
  foldedTetherEnergy,
  foldedTetherMomentum,
  foldedTetherShare,
  foldedTetherEndWeight,
];
