import type { Finding } from '../../analysis/sheet/result.ts';
import type { ContainerClaim } from './containerClaim.ts';
import type { DecodeEnd } from './decoder.ts';

/** Everything that speaks for or against the frames of one decoding. */
export interface Evidence {
  readonly name: string;
  readonly decoded: number;
  readonly end: DecodeEnd;
  readonly claim: ContainerClaim;
  /** See Decoder.framesBeforeComplaint; only looked at where there was a complaint. */
  readonly beforeComplaint: number;
  /** Each frame is a file of its own. */
  readonly stills: boolean;
  readonly pts: readonly (number | null)[];
  readonly reordered: boolean;
}

/** H.264 and HEVC hold back at most 16 pictures for reordering. */
const DEEPEST_REORDER = 16;

/** Wrong bytes are often decoded for a while before a decoder notices: so many frames before its complaint are not trusted. */
const NOTICED_LATE = 8;

/**
 * How many frames can be trusted: those before the first error, since later ones may be predicted from what was lost. No rule
 * finds wrong bytes that decode without complaint (uncompressed pictures, some MJPEG). The decoded count is held against the container's claims, because damage is often silent.
 */
export function trust(evidence: Evidence): { frameCount: number; findings: readonly Finding[] } {
  const { name, decoded, end, claim } = evidence;
  const reasons = damageOf(evidence);
  let frameCount = end.complaint === null ? decoded : Math.min(decoded, evidence.beforeComplaint);
  // a file that is only cut is right up to the cut
  const wrongBytes = end.complaint !== null && claim.missingBytes === 0 && !evidence.stills;
  if (wrongBytes) frameCount = Math.max(0, frameCount - NOTICED_LATE);
  if (reasons.length > 0 && evidence.reordered) {
    frameCount = beforeHole(evidence.pts.slice(0, frameCount));
  }
  const findings: Finding[] = [];
  if (end.changed !== null) {
    const text = `${name}: the ${end.changed} in frame ${decoded}; only the ${decoded} frames before it are used`;
    findings.push({ level: 'caution', code: 'footageChanges', text });
  }
  if (reasons.length > 0) {
    const of = claim.frames === null ? `${decoded} decoded` : `${claim.frames} listed`;
    const text = `${name}: damaged (${reasons.join('; ')}): ${frameCount} of ${of} frames can be trusted, those ${wrongBytes ? 'well ' : ''}before the first error`;
    findings.push({ level: 'caution', code: 'footageDamaged', text });
  }
  return { frameCount, findings };
}

function damageOf({ decoded, end, claim }: Evidence): string[] {
  const reasons: string[] = [];
  if (claim.missingBytes > 0) reasons.push(`the file ends ${claim.missingBytes} bytes early`);
  if (end.complaint !== null) reasons.push(`the decoder says "${end.complaint}"`);
  if (reasons.length === 0 && end.changed === null && claim.frames !== null && decoded < claim.frames) {
    reasons.push(`${claim.frames - decoded} frames are lost, or hidden by an edit list`);
  }
  return reasons;
}

/**
 * Where footage ends early, the last frames may have a hole: a picture was decoded, one shown before it was not. It shows as an
 * interval much longer than the usual one among the last frames.
 */
function beforeHole(pts: readonly (number | null)[]): number {
  const steps: number[] = [];
  for (let n = 1; n < pts.length; n++) steps.push((pts[n] ?? 0) - (pts[n - 1] ?? 0));
  const usual = [...steps].sort((a, b) => a - b)[steps.length >> 1] ?? 0;
  const from = Math.max(1, pts.length - DEEPEST_REORDER);
  for (let n = from; n < pts.length; n++) {
    if ((steps[n - 1] ?? 0) > 1.5 * usual) return n;
  }
  return pts.length;
}
