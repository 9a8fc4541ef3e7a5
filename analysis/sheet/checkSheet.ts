import { rateProblem } from '../motion/prescribed/methodProblem.ts';
import { scaleProblems } from '../scale/scaleProblems.ts';
import { quantities, unitOfQuantity } from '../verdict/quantities.ts';
import { sameUnit } from '../verdict/sameUnit.ts';
import type { Finding } from './result.ts';
import type { Sheet } from './sheet.ts';
import { zeroUncertainties } from './zeroUncertainties.ts';

/** A bar shorter than this says little: half a pixel at each end is already 1 %. */
const shortBarPx = 70;

/** What is inconsistent in a sheet, as far as it can be told without the footage. `stop`: it cannot be reduced like this. */
export function checkSheet(sheet: Sheet): Finding[] {
  const findings: Finding[] = [];
  const stop = (code: string, text: string) => findings.push({ level: 'stop', code, text });
  const caution = (code: string, text: string) => findings.push({ level: 'caution', code, text });

  for (const path of zeroUncertainties(sheet)) {
    caution(
      'uncertaintyZero',
      `${path} is 0: nothing is known exactly. State its standard uncertainty, or leave it out and see what is assumed.`,
    );
  }

  const { footage, clock, camera, scale, bodies, tether } = sheet;
  if (footage.lastFrame !== undefined && footage.lastFrame <= footage.firstFrame) {
    stop(
      'framesReversed',
      `footage.lastFrame (${footage.lastFrame}) must be after footage.firstFrame (${footage.firstFrame}).`,
    );
  }
  if (clock.kind === 'captureRate') {
    const unfit = rateProblem(sheet.motion, clock.captureRateHz);
    if (unfit) findings.push(unfit);
  }

  if (
    clock.kind === 'captureRate' &&
    camera?.exposureS !== undefined &&
    camera.exposureS * clock.captureRateHz > 1
  ) {
    stop(
      'exposureTooLong',
      `camera.exposureS (${camera.exposureS} s) is longer than the time of a frame (${1 / clock.captureRateHz} s): check it and clock.captureRateHz.`,
    );
  }

  const filmed = scale.bars.length > 0 || (scale.fiducials?.length ?? 0) >= 4;
  if (!filmed && scale.fromGravity === undefined) {
    stop(
      'scaleMissing',
      'scale: state a scale bar (scale.bars) or at least four fiducials (scale.fiducials).',
    );
  }
  if (!filmed && scale.fromGravity && !bodies.some((b) => b.role === 'reference')) {
    stop('referenceMissing', 'scale.fromGravity needs a body with the role "reference" that falls freely.');
  }
  if (filmed && scale.fromGravity) {
    caution('fromGravityNotUsed', 'scale.fromGravity was not used: a scale bar or fiducials are stated.');
  }
  scale.bars.forEach((bar, i) => {
    const lengthPx = Math.hypot(bar.b.x - bar.a.x, bar.b.y - bar.a.y);
    if (lengthPx < 2)
      stop(
        'barTooShort',
        `scale.bars[${i}]: both marks are at the same place; mark the two ends of the bar.`,
      );
    else if (lengthPx < shortBarPx) {
      caution(
        'barShort',
        `scale.bars[${i}]: only ${lengthPx.toFixed(0)} px long, so the scale is uncertain; use a longer bar.`,
      );
    }
  });
  findings.push(...scaleProblems(sheet));
  if (scale.plumb && Math.hypot(scale.plumb.b.x - scale.plumb.a.x, scale.plumb.b.y - scale.plumb.a.y) < 2) {
    stop(
      'plumbTooShort',
      'scale.plumb: both points are at the same place; mark two places far apart on the plumb line.',
    );
  }

  const seen = new Set<string>();
  for (const body of bodies) {
    if (seen.has(body.id))
      stop('bodyTwice', `bodies: the id "${body.id}" stands twice; give each body its own.`);
    seen.add(body.id);
    const last = footage.lastFrame ?? Number.POSITIVE_INFINITY;
    if (body.frame < footage.firstFrame || body.frame > last) {
      stop(
        'bodyOutsideFrames',
        `bodies: "${body.id}" is placed in frame ${body.frame}, outside the frames to be reduced.`,
      );
    }
  }
  for (const role of ['tip', 'reference'] as const) {
    if (bodies.filter((b) => b.role === role).length > 1) {
      stop('roleTwice', `bodies: only one body can be the ${role}; give the others the role "other".`);
    }
  }

  if (tether?.separationM !== undefined && tether.separationM > tether.lengthM) {
    stop(
      'separationTooLong',
      `tether.separationM (${tether.separationM} m) is longer than the tether (${tether.lengthM} m).`,
    );
  }
  if (tether && !bodies.some((b) => b.role === 'tip')) {
    caution('tipMissing', 'A tether is stated but no body is the tip: nothing can be said of the tether.');
  }
  sheet.limits.forEach((limit, i) => {
    const unit = unitOfQuantity(limit.quantity);
    if (unit === null) {
      stop(
        'limitUnknown',
        `limits[${i}]: there is no quantity "${limit.quantity}"; it can be ${quantities.map((q) => q.quantity).join(', ')}.`,
      );
    } else if (!sameUnit(limit.unit, unit)) {
      stop(
        'limitUnit',
        `limits[${i}]: ${limit.quantity} is in ${unit}, but its limit is stated in ${limit.unit}; convert the limit.`,
      );
    }
  });
  return findings;
}
