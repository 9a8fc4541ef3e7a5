import type { NumbersInput } from '../../analysis/keyValues/numbersInput.ts';
import type { Common, WorldTrack } from '../../analysis/motion/worldTrack.ts';
import { type Sheet, sheetSchema } from '../../analysis/sheet/sheet.ts';
import { type SeededRandom, seededRandom } from '../../fixtures/random.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';
import { sphereDrop } from './ballTruth.ts';
import { extensionTimeReduced, shareFallen } from './foldedTetherTruth.ts';

const lengthM = 0.9;
export const gMps2 = 9.8123;
const unitS = Math.sqrt(lengthM / gMps2);
const extensionS = extensionTimeReduced * unitS;

/** How the tip goes back up: twice √(gL) = 5.9 m/s, the order that a whip of chain shows. */
const reboundMps = 2 * Math.sqrt(gMps2 * lengthM);

export interface RecordSpec {
  readonly captureRateHz: number;
  /** Standard deviation of each position, and what the record states of it. */
  readonly noiseM: number;
  readonly seed: number;
  /** Falls in air, and the sheet states diameter and mass; absent: in vacuum, and it states neither. */
  readonly sphere?: { readonly diameterM: number; readonly massKg: number };
  /** How long both are filmed at rest [s]; release falls anywhere within the frame after. */
  readonly restS?: number;
  /** How long after extension the record ends [s]. */
  readonly afterS?: number;
  /** When the ball meets the ground, after release [s]: it stays there. */
  readonly landsS?: number;
}

export interface SyntheticRecord {
  readonly input: NumbersInput;
  readonly truth: {
    readonly 'ball.g': number;
    readonly 'tip.releaseTime': number;
    readonly 'tip.extensionTime': number;
    readonly 'ball.dropAtExtension': number;
  };
}

/** The air of the example sheet: 21 °C, 100 800 Pa, 45 %; density and viscosity from tables of moist air. */
const air = { airDensityKgpm3: 1.1893, airViscosityPas: 1.818e-5 };

/** Longer than any record lasts after release [s]. */
const longestFallS = 0.8;
/** The integration of each sphere is done once: many records share it. */
const drops = new Map<RecordSpec['sphere'], (timeS: number) => number>();

function dropOf(sphere: RecordSpec['sphere']): (timeS: number) => number {
  let drop = drops.get(sphere);
  if (!drop) {
    drop = sphere
      ? sphereDrop(gMps2, { ...sphere, ...air }, longestFallS)
      : (t: number) => 0.5 * gMps2 * Math.max(0, t) ** 2;
    drops.set(sphere, drop);
  }
  return drop;
}

/** Positions of tip and ball through a whole drop, without any picture; truth from closed forms and an integration of its own. */
export function syntheticRecord(spec: RecordSpec): SyntheticRecord {
  const random = seededRandom(spec.seed);
  const frameTimeS = 1 / spec.captureRateHz;
  const restFrames = Math.round((spec.restS ?? 0.05) * spec.captureRateHz);
  const releaseS = (restFrames + random.uniform()) * frameTimeS;
  const lastsS = releaseS + extensionS + (spec.afterS ?? 0.04);
  const count = Math.floor(lastsS / frameTimeS) + 1;
  const drop = dropOf(spec.sphere);
  const landsS = spec.landsS ?? Number.POSITIVE_INFINITY;

  const tip = trackOf('tip', 'tip', count, frameTimeS, spec.noiseM, random, (t) => tipHeight(t - releaseS));
  const ball = trackOf(
    'ball',
    'reference',
    count,
    frameTimeS,
    spec.noiseM,
    random,
    (t) => -drop(Math.min(landsS, t - releaseS)),
  );
  return {
    input: {
      tracks: [tip, ball],
      common: commonOf(frameTimeS),
      gravity: { gMps2, uGMps2: 0.0001 },
      sheet: sheetOf(spec),
    },
    truth: {
      'ball.g': gMps2,
      'tip.releaseTime': releaseS,
      'tip.extensionTime': extensionS,
      'ball.dropAtExtension': drop(extensionS),
    },
  };
}

function tipHeight(afterReleaseS: number): number {
  const past = afterReleaseS - extensionS;
  if (past > 0) return -lengthM + reboundMps * past - 0.5 * gMps2 * past * past;
  return -lengthM * shareFallen(afterReleaseS / unitS);
}

/** Scale and clock without uncertainty: what is tested is what the positions alone say. */
function commonOf(frameTimeS: number): Common {
  return { length: [], time: [], uDownRad: 0, frameTimeS, exposureS: 0, metrePerPx: 0.001 };
}

function trackOf(
  bodyId: string,
  role: WorldTrack['role'],
  count: number,
  frameTimeS: number,
  noiseM: number,
  random: SeededRandom,
  heightM: (timeS: number) => number,
): WorldTrack {
  const timeS = Float64Array.from({ length: count }, (_, i) => i * frameTimeS);
  return {
    bodyId,
    role,
    frame: Int32Array.from({ length: count }, (_, i) => i),
    timeS,
    xM: timeS.map(() => noiseM * random.gaussian()),
    yM: timeS.map((t) => heightM(t) + noiseM * random.gaussian()),
    uXM: new Float64Array(count).fill(noiseM),
    uYM: new Float64Array(count).fill(noiseM),
  };
}

function sheetOf(spec: RecordSpec): Sheet {
  const sheet = exampleSheet();
  const [tip, ball] = sheet.bodies;
  return sheetSchema.parse({
    ...sheet,
    tether: { lengthM },
    bodies: [tip, { ...ball, diameterM: undefined, massKg: undefined, ...spec.sphere }],
    limits: [],
  });
}

/** The same record with its tracks changed. */
export function withTracks(
  input: NumbersInput,
  change: (track: WorldTrack) => WorldTrack | null,
): NumbersInput {
  return { ...input, tracks: input.tracks.flatMap((t) => change(t) ?? []) };
}

/** The part of a track whose frames satisfy a condition. */
export function framesOf(track: WorldTrack, wanted: (timeS: number) => boolean): WorldTrack {
  const keep = Array.from(track.timeS.keys()).filter((i) => wanted(track.timeS[i]));
  const pick = (values: Float64Array) => Float64Array.from(keep, (i) => values[i]);
  return {
    ...track,
    frame: Int32Array.from(keep, (i) => track.frame[i]),
    timeS: pick(track.timeS),
    xM: pick(track.xM),
    yM: pick(track.yM),
    uXM: pick(track.uXM),
    uYM: pick(track.uYM),
  };
}
