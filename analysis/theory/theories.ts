import type { WorldTrack } from '../motion/worldTrack.ts';
import type { Theory } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { airOf } from './air.ts';
import type { Curve } from './curve.ts';
import { foldedTetherEnergy, foldedTetherMomentum } from './foldedTether.ts';
import { freeFall } from './freeFall.ts';
import { freeFallDrag } from './freeFallDrag.ts';
import type { LocalGravity } from './normalGravity.ts';

/** What a model is worked out from: the sheet's statements and the body's own release. */
export interface TheoryInput {
  readonly track: WorldTrack;
  readonly body: Sheet['bodies'][number];
  readonly tether: Sheet['tether'];
  readonly ambient: Sheet['ambient'];
  readonly gravity: LocalGravity;
  readonly releaseS: number;
  readonly uReleaseS: number;
  /** Height before release [m]. */
  readonly startYM: number;
  /** Instants at which the curve is wanted; those of the body's motion. */
  readonly timeS: Float64Array;
  /** End of what the model describes: extension or landing [s]. */
  readonly untilS: number;
  /** Relative standard uncertainty of all lengths. */
  readonly uLengthRel: number;
}

interface Model {
  readonly name: Theory['model'];
  /** Whether the model can say anything of this body with what is stated. */
  applies(input: TheoryInput): boolean;
  curve(input: TheoryInput): Curve;
  parameters(input: TheoryInput): { value: Record<string, number>; u: Record<string, number> };
}

const common = (input: TheoryInput) => ({
  value: { gMps2: input.gravity.gMps2, releaseS: input.releaseS },
  u: { gMps2: input.gravity.uGMps2, releaseS: input.uReleaseS },
});
const withLength = (input: TheoryInput) => ({
  value: { ...common(input).value, lengthM: input.tether?.lengthM ?? 0 },
  u: { ...common(input).u, lengthM: input.tether?.uLengthM ?? 0 },
});
const isTipOfTether = (input: TheoryInput) => input.track.role === 'tip' && input.tether !== undefined;

/** The models, in the order in which they are shown. A new one is one more entry. */
export const models: readonly Model[] = [
  {
    name: 'freeFall',
    applies: () => true,
    curve: (input) => freeFall(input.timeS, input.releaseS, input.gravity.gMps2),
    parameters: common,
  },
  {
    name: 'freeFallDrag',
    applies: ({ body }) => body.role !== 'tip' && body.diameterM !== undefined && body.massKg !== undefined,
    curve: ({ timeS, releaseS, gravity, body, ambient }) =>
      freeFallDrag(
        timeS,
        releaseS,
        gravity.gMps2,
        { diameterM: body.diameterM ?? 0, massKg: body.massKg ?? 0 },
        airOf(ambient),
      ),
    parameters(input) {
      const { value, u } = common(input);
      const { diameterM = 0, massKg = 0 } = input.body;
      return {
        value: { ...value, diameterM, massKg, airDensityKgpm3: airOf(input.ambient).densityKgpm3 },
        u,
      };
    },
  },
  {
    name: 'foldedTetherEnergy',
    applies: isTipOfTether,
    curve: ({ timeS, releaseS, tether, gravity }) =>
      foldedTetherEnergy(timeS, releaseS, tether?.lengthM ?? 0, gravity.gMps2),
    parameters: withLength,
  },
  {
    name: 'foldedTetherMomentum',
    applies: isTipOfTether,
    curve: ({ timeS, releaseS, tether, gravity }) =>
      foldedTetherMomentum(timeS, releaseS, tether?.lengthM ?? 0, gravity.gMps2),
    parameters: withLength,
  },
];

/** Every model that applies to a body, with its curve and how far the measured positions are from it. */
export function theories(input: TheoryInput): Theory[] {
  const within = { ...input, timeS: input.timeS.filter((t) => t <= input.untilS) };
  return models
    .filter((model) => model.applies(input))
    .map((model) => {
      const curve = model.curve(within);
      const { value, u } = model.parameters(input);
      return {
        model: model.name,
        body: input.body.id,
        parameters: value,
        uParameters: u,
        ...chiSquared(model, input),
        curve: {
          timeS: Array.from(curve.timeS),
          yM: Array.from(curve.yM, (y) => y + input.startYM),
          vyMps: Array.from(curve.vyMps),
          ayMps2: Array.from(curve.ayMps2),
        },
      };
    });
}

/**
 * Sum of squared standardised distances of the measured heights from the model after release. Each height's uncertainty is
 * that of tracking with that of the scale at its fall; nothing is fitted but the release instant and the start, so two degrees
 * of freedom are gone.
 */
function chiSquared(model: Model, input: TheoryInput): { chiSquared: number; dof: number } {
  const { track, releaseS, untilS, startYM, uLengthRel } = input;
  const used = Array.from(track.timeS.keys()).filter(
    (i) => track.timeS[i] > releaseS && track.timeS[i] <= untilS,
  );
  const curve = model.curve({ ...input, timeS: Float64Array.from(used, (i) => track.timeS[i]) });
  let sum = 0;
  for (let k = 0; k < curve.timeS.length; k++) {
    const i = used[k];
    const fall = track.yM[i] - startYM;
    sum += (fall - curve.yM[k]) ** 2 / (track.uYM[i] ** 2 + (uLengthRel * fall) ** 2);
  }
  return { chiSquared: sum, dof: Math.max(0, curve.timeS.length - 2) };
}
