import { ballFall } from '../motion/ballFall.ts';
import { type Extension, type ExtensionFound, extensionOf } from '../motion/extension.ts';
import { motionOf } from '../motion/motionOf.ts';
import { type Release, releaseOf } from '../motion/release.ts';
import type { Common, WorldTrack } from '../motion/worldTrack.ts';
import type { Finding, KeyValue, Motion, Theory } from '../sheet/result.ts';
import type { Sheet, SheetBody } from '../sheet/sheet.ts';
import { airOf } from '../theory/air.ts';
import type { LocalGravity } from '../theory/normalGravity.ts';
import { theories } from '../theory/theories.ts';
import { measured } from '../uncertainty/measured.ts';
import { uLengthRel } from './commonSources.ts';
import { dropAndLead, extensionTimes } from './extensionValues.ts';
import { gravityCheck, gravityOf } from './gravityCheck.ts';
import { peaksOf } from './peaks.ts';

export interface NumbersInput {
  readonly tracks: readonly WorldTrack[];
  readonly common: Common;
  readonly gravity: LocalGravity;
  readonly sheet: Sheet;
}

export interface Numbers {
  readonly motion: Record<string, Motion>;
  readonly keyValues: KeyValue[];
  readonly theory: Theory[];
  readonly findings: Finding[];
}

/** A track shorter than this has no motion worth the name. */
const leastPoints = 8;

/** From positions to motion, events, key values and theory. */
export function numbers(input: NumbersInput): Numbers {
  const { tracks, common, gravity, sheet } = input;
  const findings: Finding[] = [];
  const keyValues: KeyValue[] = [];
  const usable = tracks.filter((t) => t.timeS.length >= leastPoints);
  const releases = new Map(usable.map((t) => [t.bodyId, releaseOf(t)]));
  const tip = usable.find((t) => t.role === 'tip');
  const ball = usable.find((t) => t.role === 'reference');
  const tipRelease = tip ? (releases.get(tip.bodyId) ?? null) : null;
  const ballRelease = ball ? (releases.get(ball.bodyId) ?? null) : null;
  for (const t of usable) findings.push(...releaseFindings(t, releases.get(t.bodyId) ?? null));
  if (tipRelease && ballRelease) findings.push(...releaseDifference(tipRelease, ballRelease));

  const found: ExtensionFound | null =
    tip && tipRelease && sheet.tether
      ? extensionOf(tip, tipRelease.timeS, tipRelease.yM, sheet.tether.lengthM, common.frameTimeS)
      : null;
  if (found && !found.ok) {
    findings.push({
      level: 'caution',
      code: 'extensionNotSeen',
      text: `Extension was not seen: ${found.reason}.`,
    });
  }
  const extension: Extension | null = found?.ok ? found.extension : null;

  const motions = new Map(
    usable.map((t) => {
      const release = releases.get(t.bodyId);
      const breaks = [
        ...(release ? [release.timeS] : []),
        ...(t.role === 'tip' && extension ? [extension.timeS] : []),
      ];
      return [t.bodyId, motionOf(t, breaks, common.frameTimeS)];
    }),
  );

  const fall =
    ball && ballRelease
      ? ballFall(
          ball,
          ballRelease.timeS,
          Number.POSITIVE_INFINITY,
          common.frameTimeS,
          gravity.gMps2,
          sphereOf(sheet, ball),
          airOf(sheet.ambient),
        )
      : null;
  if (ball && ballRelease && !fall) {
    findings.push({
      level: 'caution',
      code: 'fallTooShort',
      text: 'The reference body is followed over too short a fall: ball.g cannot be given. Film more of its fall.',
    });
  }
  if (fall) {
    const g = gravityOf(fall, common);
    keyValues.push(g);
    findings.push(gravityCheck(g, gravity));
    if (!fall.air) {
      findings.push({
        level: 'caution',
        code: 'dragNotTaken',
        text: 'Diameter and mass of the reference body are not both stated: ball.g includes the drag of the air (0.1 % for a 20 mm steel ball, 5 % for a hollow plastic one).',
      });
    }
  }
  if (tip && tipRelease) {
    keyValues.push(
      measured('tip.releaseTime', tipRelease.timeS, 's', [{ source: 'positions', u: tipRelease.uTimeS }], {
        definition: 'instant the tip starts to fall, on the clock of the frames',
      }),
    );
    const motion = motions.get(tip.bodyId);
    if (motion) {
      const lastS = tip.timeS[tip.timeS.length - 1];
      const peaks = peaksOf(motion, tipRelease.timeS, extension?.timeS ?? lastS, common, extension !== null);
      keyValues.push(...peaks.keyValues);
      findings.push(...peaks.findings);
    }
  }
  if (tipRelease && extension)
    keyValues.push(...extensionTimes(tipRelease, extension, common, sheet.tether, gravity));
  if (tipRelease && ballRelease && extension && fall) {
    if (extension.timeS <= fall.lastS + 2 * common.frameTimeS) {
      keyValues.push(...dropAndLead(fall, ballRelease, tipRelease, extension, common, sheet.tether));
    } else {
      findings.push({
        level: 'caution',
        code: 'ballGoneBeforeExtension',
        text: 'The reference body landed or was lost before the tether was straight: neither its drop at extension nor the lead can be given.',
      });
    }
  }

  const theory = usable.flatMap((track) => {
    const release = releases.get(track.bodyId);
    const body = bodyOf(sheet, track);
    const motion = motions.get(track.bodyId);
    if (!release || !motion || track.role === 'other') return [];
    const end = track.role === 'tip' ? extension?.timeS : fall?.lastS;
    return theories({
      track,
      body,
      tether: sheet.tether,
      ambient: sheet.ambient,
      gravity,
      releaseS: release.timeS,
      uReleaseS: release.uTimeS,
      startYM: release.yM,
      timeS: Float64Array.from(motion.motion.timeS),
      untilS: end ?? track.timeS[track.timeS.length - 1],
      uLengthRel: uLengthRel(common),
    });
  });

  return {
    motion: Object.fromEntries(Array.from(motions, ([id, m]) => [id, m.motion])),
    keyValues,
    theory,
    findings,
  };
}

function bodyOf(sheet: Sheet, track: WorldTrack): SheetBody {
  const body = sheet.bodies.find((b) => b.id === track.bodyId);
  if (!body) throw new Error(`numbers: a track of "${track.bodyId}", which the sheet does not have`);
  return body;
}

function sphereOf(sheet: Sheet, track: WorldTrack) {
  const { diameterM, massKg } = bodyOf(sheet, track);
  return diameterM !== undefined && massKg !== undefined ? { diameterM, massKg } : null;
}

/** Fewer rest frames than this leave the instant of release to the assumption that the body started from rest. */
const leastRestFrames = 3;

function releaseFindings(track: WorldTrack, release: Release | null): Finding[] {
  if (track.role === 'other') return [];
  if (!release) {
    return [
      {
        level: 'caution',
        code: 'releaseNotFound',
        text: `No release of body ${track.bodyId} was found: it is not seen to start falling.`,
      },
    ];
  }
  if (release.restFrames >= leastRestFrames) return [];
  return [
    {
      level: 'caution',
      code: 'restNotSeen',
      text: `Only ${release.restFrames} frames show body ${track.bodyId} at rest: its release is worked back on the assumption that it started from rest. Film at least ${leastRestFrames} frames before release.`,
    },
  ];
}

/** Bodies meant to be let go together: a difference beyond its uncertainty moves the lead by the speed gained in it. */
function releaseDifference(tip: Release, ball: Release): Finding[] {
  const apartS = tip.timeS - ball.timeS;
  const u = Math.hypot(tip.uTimeS, ball.uTimeS);
  const earlier = apartS < 0 ? 'before' : 'after';
  const ms = Math.abs(apartS * 1000).toPrecision(2);
  if (Math.abs(apartS) <= Math.max(3 * u, 2e-4)) return [];
  return [
    {
      level: Math.abs(apartS) > 0.002 ? 'caution' : 'note',
      code: 'releasesDiffer',
      text: `The tip was let go ${ms} ms ${earlier} the reference body (standard uncertainty ${(u * 1000).toPrecision(1)} ms).`,
    },
  ];
}
