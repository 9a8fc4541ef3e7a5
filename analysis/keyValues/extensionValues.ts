import type { BallFall } from '../motion/ballFall.ts';
import type { Extension } from '../motion/extension.ts';
import type { Release } from '../motion/release.ts';
import type { Common } from '../motion/worldTrack.ts';
import type { KeyValue } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import type { LocalGravity } from '../theory/normalGravity.ts';
import type { Contribution } from '../uncertainty/effectiveDof.ts';
import { measured } from '../uncertainty/measured.ts';
import { commonSources } from './commonSources.ts';

/** tip.extensionTime and, with the tether's length stated, tip.extensionTimeReduced. */
export function extensionTimes(
  release: Release,
  extension: Extension,
  common: Common,
  tether: Sheet['tether'],
  gravity: LocalGravity,
): KeyValue[] {
  const durationS = extension.timeS - release.timeS;
  const sources: Contribution[] = [
    { source: 'instant of extension', u: extension.uTimeS },
    { source: 'instant of release', u: release.uTimeS },
    ...commonSources(common, durationS, { length: 0, time: 1 }),
  ];
  const values = [
    measured('tip.extensionTime', durationS, 's', sources, {
      definition: `from release of the tip to extension, seen as the tip's ${extension.seenAs === 'lowest place' ? 'lowest place' : 'greatest distance from the anchor'}`,
    }),
  ];
  if (tether) {
    const unitS = Math.sqrt(tether.lengthM / gravity.gMps2);
    const reduced = durationS / unitS;
    values.push(
      measured(
        'tip.extensionTimeReduced',
        reduced,
        '1',
        [
          ...sources.map((s) => ({ ...s, u: s.u / unitS })),
          { source: 'tether length', u: (reduced * (tether.uLengthM ?? 0)) / (2 * tether.lengthM) },
          { source: 'local gravity', u: Math.abs(reduced * gravity.uGMps2) / (2 * gravity.gMps2) },
        ],
        { definition: 'tip.extensionTime / √(L/g) with the stated length and local gravity' },
      ),
    );
  }
  return values;
}

/** ball.dropAtExtension, its share of the length, and tip.lead. */
export function dropAndLead(
  fall: BallFall,
  ballRelease: Release,
  tipRelease: Release,
  extension: Extension,
  common: Common,
  tether: Sheet['tether'],
): KeyValue[] {
  const at = fall.heightAt(extension.timeS);
  const dropM = ballRelease.yM - at.yM;
  const speedMps = Math.abs(fall.gMps2 * (extension.timeS - ballRelease.timeS));
  const own: Contribution[] = [
    { source: 'instant of extension', u: speedMps * extension.uTimeS },
    { source: 'positions of the ball', u: Math.hypot(at.uYM, ballRelease.uYM) },
  ];
  const values = [
    measured(
      'ball.dropAtExtension',
      dropM,
      'm',
      [...own, ...commonSources(common, dropM, { length: 1, time: 0 })],
      {
        definition: "fall of the ball from its own start to the tip's extension",
      },
    ),
  ];
  if (tether) {
    const reduced = dropM / tether.lengthM;
    values.push(
      measured(
        'ball.dropAtExtensionReduced',
        reduced,
        '1',
        [
          ...own.map((s) => ({ ...s, u: s.u / tether.lengthM })),
          ...commonSources(common, reduced, { length: 1, time: 0 }),
          { source: 'tether length', u: (reduced * (tether.uLengthM ?? 0)) / tether.lengthM },
        ],
        { definition: 'ball.dropAtExtension / L with the stated length' },
      ),
    );
  }
  const leadM = tipRelease.yM - extension.yM - dropM;
  values.push(
    measured(
      'tip.lead',
      leadM,
      'm',
      [
        ...own,
        { source: 'lowest place of the tip', u: Math.hypot(extension.uYM, tipRelease.uYM) },
        ...commonSources(common, leadM, { length: 1, time: 0 }),
      ],
      { definition: 'fall of the tip less fall of the ball at extension, each from its own start' },
    ),
  );
  return values;
}
