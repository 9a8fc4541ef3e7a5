import { lagOneCorrelation } from '../fit/lagOneCorrelation.ts';
import { rootMeanSquare } from '../fit/rootMeanSquare.ts';
import { adaptive } from '../motion/adaptive.ts';
import type { BodyMotion } from '../motion/bodyMotion.ts';
import type { Break } from '../motion/breaks.ts';
import { motionOf } from '../motion/motionOf.ts';
import { methodOf } from '../motion/prescribed/methodOf.ts';
import { methodProblem } from '../motion/prescribed/methodProblem.ts';
import { simultaneousFactor } from '../motion/simultaneousBand.ts';
import type { WorldTrack } from '../motion/worldTrack.ts';
import type { Finding, KeyValue, LoadCellResult, Motion, Tension, Theory } from '../sheet/result.ts';
import type { Sheet, SheetBody } from '../sheet/sheet.ts';
import { tipForces } from '../theory/force/tipForces.ts';
import { theories } from '../theory/theories.ts';
import { uLengthRel } from './commonSources.ts';
import { eventsOf } from './events.ts';
import { motionValues } from './motionValues.ts';
import type { NumbersInput } from './numbersInput.ts';

export interface Numbers {
  readonly motion: Record<string, Motion>;
  readonly keyValues: KeyValue[];
  readonly theory: Theory[];
  readonly tension: Tension | null;
  readonly loadCell: LoadCellResult | null;
  readonly findings: Finding[];
}

/** A track shorter than this has no motion worth the name. */
const leastPoints = 8;

/** From positions to motion, events, key values and theory. */
export function numbers(input: NumbersInput): Numbers {
  const { common, gravity, sheet } = input;
  const usable = input.tracks.filter((t) => t.timeS.length >= leastPoints);
  const unfit = methodProblem(sheet.motion, usable, common.frameTimeS);
  if (unfit)
    return { motion: {}, keyValues: [], theory: [], tension: null, loadCell: null, findings: [unfit] };
  const method = methodOf(sheet.motion, adaptive);
  const { releases, extension, fall, keyValues, findings } = eventsOf({ ...input, tracks: usable });

  const motions = new Map(
    usable.map((t) => {
      const release = releases.get(t.bodyId);
      const breaks: Break[] = [
        ...(release ? [{ kind: 'release' as const, timeS: release.timeS, uTimeS: release.uTimeS }] : []),
        ...(t.role === 'tip' && extension
          ? [{ kind: 'extension' as const, timeS: extension.timeS, uTimeS: extension.uTimeS }]
          : []),
      ];
      return [t.bodyId, motionOf(t, breaks, common.frameTimeS, method)];
    }),
  );

  const ofMotion = motionValues({ ...input, tracks: usable }, { releases, extension, fall }, motions);
  keyValues.push(...ofMotion.keyValues);
  findings.push(...ofMotion.findings);

  const theory: Theory[] = [];
  for (const track of usable) {
    const release = releases.get(track.bodyId);
    const body = bodyOf(sheet, track);
    const motion = motions.get(track.bodyId);
    if (!release || !motion || track.role === 'other') continue;
    const end = track.role === 'tip' ? extension?.timeS : fall?.lastS;
    const { measuredYM, yM } = motion.motion;
    // What the smooth motion leaves is the noise, whatever the theory: no model is refused for a noise that was understated.
    const scatter = track.yM.map((_, i) => (measuredYM[i] - yM[i]) / track.uYM[i]);
    const found = theories({
      track,
      body,
      tether: sheet.tether,
      ambient: sheet.ambient,
      settings: sheet.theory,
      gravity,
      releaseS: release.timeS,
      uReleaseS: release.uTimeS,
      startYM: release.yM,
      uStartYM: release.uYM,
      frameTimeS: common.frameTimeS,
      timeS: Float64Array.from(motion.motion.timeS),
      untilS: end ?? track.timeS[track.timeS.length - 1],
      uLengthRel: uLengthRel(common),
      uTimeRel: Math.hypot(...common.time.map((t) => t.uRel)),
      correlation: lagOneCorrelation(scatter, track.frame),
      noiseOverStated: Math.max(1, rootMeanSquare(scatter) || 1),
    });
    theory.push(...found.theory);
    findings.push(...found.findings);
  }

  const tip = usable.find((t) => t.role === 'tip');
  const [release, motion] = [tip && releases.get(tip.bodyId), tip && motions.get(tip.bodyId)];
  const forces =
    release && motion
      ? tipForces({
          sheet,
          gravity,
          uLengthRel: uLengthRel(common),
          release,
          extensionS: extension?.timeS ?? null,
          motion,
          record: input.forceRecord ?? null,
        })
      : null;
  findings.push(...(forces?.findings ?? []));

  return {
    motion: Object.fromEntries(Array.from(motions, ([id, m]) => [id, withBand(m, sheet.motion)])),
    keyValues,
    theory,
    tension: forces?.tension ?? null,
    loadCell: forces?.loadCell ?? null,
    findings,
  };
}

/** The motion for the result, with the factor of a band for the whole curve where the sheet asks for it. */
function withBand({ motion, bandwidthHz }: BodyMotion, asked: Sheet['motion']): Motion {
  if (!asked?.simultaneousBands) return motion;
  const factor = simultaneousFactor(motion.timeS, bandwidthHz);
  return { ...motion, settings: { ...motion.settings, simultaneousFactor95: factor } };
}

function bodyOf(sheet: Sheet, track: WorldTrack): SheetBody {
  const body = sheet.bodies.find((b) => b.id === track.bodyId);
  if (!body) throw new Error(`numbers: a track of "${track.bodyId}", which the sheet does not have`);
  return body;
}
