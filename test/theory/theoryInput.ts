import type { WorldTrack } from '../../analysis/motion/worldTrack.ts';
import { sheetSchema } from '../../analysis/sheet/sheet.ts';
import type { TheoryInput } from '../../analysis/theory/theories.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';

export const lengthM = 0.9;
export const gMps2 = 9.8123;
export const releaseS = 0.05;

/** What every model of tip or ball is asked with; its track is one that only theory's own tests replace. */
export function theoryInput(role: 'tip' | 'reference', timeS: Float64Array): TheoryInput {
  const sheet = sheetSchema.parse(exampleSheet());
  const body = sheet.bodies.find((b) => b.role === role);
  if (!body) throw new Error(`the example sheet has no ${role}`);
  return {
    track: trackAt(role, timeS, () => 0),
    body,
    tether: { lengthM, uLengthM: 0.001 },
    ambient: sheet.ambient,
    gravity: { gMps2, uGMps2: 0.0001 },
    releaseS,
    uReleaseS: 0.0001,
    startYM: 0,
    timeS,
    untilS: Number.POSITIVE_INFINITY,
    uLengthRel: 0,
  };
}

/** A track of stated heights, each with a standard uncertainty of 0.1 mm. */
export function trackAt(
  role: 'tip' | 'reference',
  timeS: Float64Array,
  heightM: (timeS: number, i: number) => number,
): WorldTrack {
  const n = timeS.length;
  return {
    bodyId: role === 'tip' ? 'tip' : 'ball',
    role,
    frame: Int32Array.from({ length: n }, (_, i) => i),
    timeS,
    xM: new Float64Array(n),
    yM: timeS.map(heightM),
    uXM: new Float64Array(n).fill(1e-4),
    uYM: new Float64Array(n).fill(1e-4),
  };
}
