import type { BodyMotion } from '../motion/bodyMotion.ts';
import type { Common } from '../motion/worldTrack.ts';
import {
  leastFramesInHalfWidth,
  peakAccelerationError,
  safeFramesInHalfWidth,
} from '../planner/peakChart.ts';
import { atPlace } from '../scale/displacement.ts';
import type { Finding, KeyValue, Motion } from '../sheet/result.ts';
import { measured } from '../uncertainty/measured.ts';
import { accelerationAt, speedAt } from './alongMotion.ts';
import { commonSources } from './commonSources.ts';
import { peakWidth } from './peakWidth.ts';

export interface Peaks {
  readonly keyValues: KeyValue[];
  readonly findings: Finding[];
}

/** The stretch in which the peak is sought. */
interface Stretch {
  /** Indices of the motion's instants. */
  readonly inside: readonly number[];
  /** What ends it, in words. */
  readonly until: string;
}

/**
 * tip.peakSpeed and tip.peakAcceleration between release and extension: the largest magnitude of the vector at a frame, the
 * acceleration within the bandwidth there.
 *
 * @param toS  extension, or the last frame where it was not seen
 */
export function peaksOf(
  body: BodyMotion,
  fromS: number,
  toS: number,
  common: Common,
  extensionSeen: boolean,
): Peaks {
  const inside = body.motion.timeS.flatMap((t, i) => (t > fromS && t < toS ? [i] : []));
  if (inside.length === 0) return { keyValues: [], findings: [] };
  const until = extensionSeen ? 'extension' : 'the last frame in which the tip was seen';
  const acceleration = peakAcceleration(body, { inside, until }, common);
  return {
    keyValues: [peakSpeed(body.motion, { inside, until }, common), ...acceleration.keyValues],
    findings: acceleration.findings,
  };
}

function peakSpeed(motion: Motion, { inside, until }: Stretch, common: Common): KeyValue {
  const speed = (i: number) => speedAt(motion, i).value;
  const s = largest(speed, inside);
  const { value, u } = speedAt(motion, s);
  const there = atPlace(common.length, { xM: motion.xM[s], yM: motion.yM[s] });
  return measured(
    'tip.peakSpeed',
    value,
    'm/s',
    [
      { source: 'positions and smoothing', u },
      { source: 'between frames', u: betweenFrames(speed, s, inside) },
      ...commonSources({ ...common, length: there }, value, { length: 1, time: -1 }),
    ],
    { definition: `largest speed at a frame between release and ${until}` },
  );
}

/**
 * The peak of the acceleration, and what the frame rate lets be said of it: frames in the half width at half peak decide (shared
 * limits, section F). Below 3 that is said and is in the budget, below 2 no figure is given. A peak that the record does not pass is
 * given as "at least".
 */
function peakAcceleration(
  { motion, bandwidthHz }: BodyMotion,
  { inside, until }: Stretch,
  common: Common,
): Peaks {
  const acceleration = (i: number) => accelerationAt(motion, i).value;
  const peak = largest(acceleration, inside);
  const { value, u } = accelerationAt(motion, peak);
  const width = peakWidth(
    inside.map((i) => motion.timeS[i]),
    inside.map(acceleration),
    inside.indexOf(peak),
  );
  const framesInHalfWidth = width.halfWidthS / common.frameTimeS;
  const rateHz = 1 / common.frameTimeS;
  const cut = isCut(motion, bandwidthHz[peak], inside, peak);
  const sources = [
    { source: 'positions and smoothing', u },
    { source: 'between frames', u: betweenFrames(acceleration, peak, inside) },
    ...commonSources(common, value, { length: 1, time: -2 }),
  ];
  const extras = { bandwidthHz: bandwidthHz[peak], framesInHalfWidth };
  const definition = `largest magnitude of the acceleration at a frame between release and ${until}, within the stated bandwidth`;

  if (cut) {
    const text = `The tip's acceleration is still rising where ${until === 'extension' ? 'the tether comes straight' : 'the track ends'}: tip.peakAcceleration is what ${rateHz.toFixed(0)} frames per second and a bandwidth of ${bandwidthHz[peak].toPrecision(2)} Hz can show of it, at least so much. A higher capture rate shows more.`;
    return {
      keyValues: [
        measured('tip.peakAcceleration', value, 'm/s2', sources, {
          ...extras,
          atLeast: true,
          definition: `at least: ${definition}`,
        }),
      ],
      findings: [{ level: 'caution', code: 'peakAtEnd', text }],
    };
  }
  const wide = `the peak of the tip's acceleration is ${framesInHalfWidth.toPrecision(2)} frames wide (half width at half its height)`;
  if (framesInHalfWidth < leastFramesInHalfWidth) {
    const text = `tip.peakAcceleration is not given: ${wide}, and with less than ${leastFramesInHalfWidth} a figure would be the camera's, not the tether's. At least ${rateFor(width.halfWidthS)} frames per second would do, more if the peak proves narrower.`;
    return { keyValues: [], findings: [{ level: 'caution', code: 'peakTooNarrow', text }] };
  }
  const limit = value * peakAccelerationError(framesInHalfWidth, asGoodAsExact);
  const narrow = framesInHalfWidth < safeFramesInHalfWidth;
  return {
    keyValues: [
      measured(
        'tip.peakAcceleration',
        value,
        'm/s2',
        [...sources, { source: 'frame rate against the width of the peak', u: limit }],
        { ...extras, definition },
      ),
    ],
    findings: narrow
      ? [
          {
            level: 'caution',
            code: 'peakNarrow',
            text: `The frame rate limits tip.peakAcceleration: ${wide}, less than ${safeFramesInHalfWidth}. At least ${rateFor(width.halfWidthS)} frames per second would do.`,
          },
        ]
      : [],
  };
}

/** Noise of the planner's chart below which it no longer matters: what noise does is in the budget already. */
const asGoodAsExact = 1e-4;

/** A frame rate that has three frames in the half width, rounded up to two digits. */
function rateFor(halfWidthS: number): number {
  const rateHz = safeFramesInHalfWidth / halfWidthS;
  const unit = 10 ** (Math.floor(Math.log10(rateHz)) - 1);
  return Math.ceil(rateHz / unit) * unit;
}

/** A change counts as seen from twice its standard uncertainty and this share of the peak; a fall to half is seen in any case. */
const seenSigma = 2;
const seenShare = 0.02;

/**
 * Whether the stretch ends on the way up: the acceleration rises to the peak by more than chance, and is not seen to come down again
 * before the end. A level acceleration, as of free fall, does neither.
 */
function isCut(motion: Motion, bandwidthHz: number, inside: readonly number[], peak: number): boolean {
  const { value, u } = accelerationAt(motion, peak);
  const lower = (i: number) => {
    const other = accelerationAt(motion, i);
    const less = value - other.value;
    return less > Math.max(seenSigma * Math.hypot(u, other.u), seenShare * value) || less > value / 2;
  };
  // Within half a period of the bandwidth the curve cannot change by itself: a fall within it is not seen.
  const resolvedS = 0.5 / bandwidthHz;
  const afterS = (i: number) => motion.timeS[i] - motion.timeS[peak];
  const rises = inside.some((i) => afterS(i) <= -resolvedS && lower(i));
  const comesDown = inside.some((i) => afterS(i) >= resolvedS && lower(i));
  return rises && !comesDown;
}

function largest(of: (i: number) => number, inside: readonly number[]): number {
  return inside.reduce((best, i) => (of(i) > of(best) ? i : best), inside[0]);
}

/** What a peak may gain before or after the frame in which it is largest: the last step up to it, as a rectangle to one side. */
function betweenFrames(of: (i: number) => number, peak: number, inside: readonly number[]): number {
  const before = inside.includes(peak - 1) ? of(peak) - of(peak - 1) : 0;
  const after = inside.includes(peak + 1) ? of(peak) - of(peak + 1) : 0;
  const step = inside.includes(peak + 1) ? Math.min(before, after) : before;
  return Math.max(0, step) / Math.sqrt(3);
}
