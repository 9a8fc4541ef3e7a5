import type { WorldTrack } from '../../analysis/motion/worldTrack.ts';
import { sheetSchema } from '../../analysis/sheet/sheet.ts';
import { airOf } from '../../analysis/theory/air.ts';
import type { Stated, Tether } from '../../analysis/theory/models/model.ts';
import type { TheoryInput } from '../../analysis/theory/theories.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';

export const lengthM = 0.9;
export const gMps2 = 9.8123;
const releaseS = 0.05;

const sheet = sheetSchema.parse(exampleSheet());

function bodyOf(role: 'tip' | 'reference') {
  const body = sheet.bodies.find((b) => b.role === role);
  if (!body) throw new Error(`the example sheet has no ${role}`);
  return body;
}

const bareTether: Tether = {
  lengthM,
  uLengthM: 0.001,
  separationM: 0,
  massKg: 0.21,
  uMassKg: 0.0001,
  links: null,
  tipMassKg: 0,
  uTipMassKg: 0,
};

/** What is stated of tip or ball: 0.9 m of tether without end weight. */
export function statedOf(role: 'tip' | 'reference', tether: Partial<Tether> = {}): Stated {
  return {
    body: bodyOf(role),
    tether: { ...bareTether, ...tether },
    gravity: { gMps2, uGMps2: 0.0001 },
    air: airOf(sheet.ambient),
  };
}

/** A track with what a reduction hands to the theory beside it. */
export function theoryInput(track: WorldTrack, rest: Partial<TheoryInput> = {}): TheoryInput {
  return {
    track,
    body: bodyOf(track.role === 'tip' ? 'tip' : 'reference'),
    tether: { lengthM, uLengthM: 0.001, massKg: 0.21, tipMassKg: 0 },
    ambient: sheet.ambient,
    settings: undefined,
    gravity: { gMps2, uGMps2: 0.0001 },
    releaseS,
    uReleaseS: 0.0001,
    startYM: 0,
    uStartYM: 1e-5,
    frameTimeS: 0.001,
    timeS: track.timeS,
    untilS: Number.POSITIVE_INFINITY,
    uLengthRel: 0.001,
    uTimeRel: 1e-5,
    correlation: 0,
    noiseOverStated: 1,
    ...rest,
  };
}
