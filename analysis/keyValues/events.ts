import { type BallFall, ballFall } from '../motion/ballFall.ts';
import { type Extension, extensionOf } from '../motion/extension.ts';
import { type Release, releaseOf } from '../motion/release.ts';
import type { WorldTrack } from '../motion/worldTrack.ts';
import { alongFall } from '../scale/displacement.ts';
import type { Finding, KeyValue } from '../sheet/result.ts';
import { airOf } from '../theory/air.ts';
import { measured } from '../uncertainty/measured.ts';
import { dropAndLead, extensionTimes } from './extensionValues.ts';
import { gravityCheck, gravityOf } from './gravityCheck.ts';
import { fallsFreelyUntil } from './landing.ts';
import type { NumbersInput } from './numbersInput.ts';
import { releaseDifference, releaseFindings } from './releaseFindings.ts';

/** The instants of a drop, the fall of its reference body, and the key values that rest on them alone. */
export interface Events {
  readonly releases: ReadonlyMap<string, Release>;
  readonly extension: Extension | null;
  readonly fall: BallFall | null;
  readonly keyValues: KeyValue[];
  readonly findings: Finding[];
}

/** Release of each body, extension of the tether, fall of the ball. */
export function eventsOf(input: NumbersInput): Events {
  const { tracks, common, gravity, sheet } = input;
  const findings: Finding[] = [];
  const keyValues: KeyValue[] = [];
  const releases = new Map<string, Release>();
  for (const track of tracks) {
    const release = releaseOf(track);
    if (release) releases.set(track.bodyId, release);
    findings.push(...releaseFindings(track, release));
  }
  const tip = tracks.find((t) => t.role === 'tip');
  const ball = tracks.find((t) => t.role === 'reference');
  const tipRelease = tip && releases.get(tip.bodyId);
  const ballRelease = ball && releases.get(ball.bodyId);
  if (tipRelease && ballRelease) findings.push(...releaseDifference(tipRelease, ballRelease));

  if (ballRelease) {
    keyValues.push(
      measured('ball.releaseTime', ballRelease.timeS, 's', [{ source: 'positions', u: ballRelease.uTimeS }], {
        definition: 'instant the reference body starts to fall, on the clock of the frames',
      }),
    );
  }
  let fall: BallFall | null = null;
  if (ball && ballRelease) {
    fall = ballFall(
      ball,
      ballRelease.timeS,
      fallsFreelyUntil(ball, ballRelease.timeS),
      common.frameTimeS,
      gravity.gMps2,
      sphereOf(input, ball),
      airOf(sheet.ambient),
    );
    if (fall) {
      const { firstS, lastS } = fall;
      const used = Array.from(ball.timeS.keys()).filter(
        (i) => ball.timeS[i] >= firstS && ball.timeS[i] <= lastS,
      );
      const of = (values: Float64Array) => used.map((i) => values[i]);
      const way = { timeS: of(ball.timeS), xM: of(ball.xM), yM: of(ball.yM) };
      const g = gravityOf(fall, { ...common, length: alongFall(common.length, way) });
      keyValues.push(g);
      findings.push(gravityCheck(g, gravity), ...dragFindings(fall));
    } else findings.push(fallTooShort);
  }

  if (!tip || !tipRelease) return { releases, extension: null, fall, keyValues, findings };
  keyValues.push(
    measured('tip.releaseTime', tipRelease.timeS, 's', [{ source: 'positions', u: tipRelease.uTimeS }], {
      definition: 'instant the tip starts to fall, on the clock of the frames',
    }),
  );
  if (!sheet.tether) return { releases, extension: null, fall, keyValues, findings };
  const found = extensionOf(tip, tipRelease.timeS, tipRelease.yM, sheet.tether, common.frameTimeS);
  if (!found.ok) {
    findings.push({
      level: 'caution',
      code: 'extensionNotSeen',
      text: `Extension was not seen: ${found.reason}.`,
    });
    return { releases, extension: null, fall, keyValues, findings };
  }
  const { extension } = found;
  keyValues.push(...extensionTimes(tipRelease, extension, common, sheet.tether, gravity));
  if (ballRelease && fall) {
    if (extension.timeS <= fall.lastS + 2 * common.frameTimeS) {
      keyValues.push(...dropAndLead(fall, ballRelease, tipRelease, extension, common, sheet.tether));
    } else findings.push(ballGoneBeforeExtension);
  }
  return { releases, extension, fall, keyValues, findings };
}

const fallTooShort: Finding = {
  level: 'caution',
  code: 'fallTooShort',
  text: 'The reference body is followed over too short a fall: ball.g cannot be given. Film more of its fall.',
};

const ballGoneBeforeExtension: Finding = {
  level: 'caution',
  code: 'ballGoneBeforeExtension',
  text: 'The reference body landed or was lost before the tether was straight: neither its drop at extension nor the lead can be given.',
};

function dragFindings(fall: BallFall): Finding[] {
  if (fall.air) return [];
  return [
    {
      level: 'caution',
      code: 'dragNotTaken',
      text: 'Diameter and mass of the reference body are not both stated: ball.g includes the drag of the air (0.1 % for a 20 mm steel ball, 5 % for a hollow plastic one).',
    },
  ];
}

function sphereOf({ sheet }: NumbersInput, track: WorldTrack) {
  const body = sheet.bodies.find((b) => b.id === track.bodyId);
  const { diameterM, massKg } = body ?? {};
  return diameterM !== undefined && massKg !== undefined ? { diameterM, massKg } : null;
}
