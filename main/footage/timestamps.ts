import type { Finding } from '../../analysis/sheet/result.ts';
import type { ContainerClaim } from './containerClaim.ts';

/** Times as they came from the decoder, and what is known of the file they came from. */
export interface RawTimes {
  readonly name: string;
  readonly kind: 'file' | 'stills';
  readonly container: ContainerClaim['container'];
  readonly pts: readonly (number | null)[];
  readonly timeBase: { readonly num: number; readonly den: number };
  /** Some frame is predicted from a later one: decode order is not display order. */
  readonly reordered: boolean;
}

/** Matroska as usually written rounds times to 1 ms: an error of up to half an interval at 1000 frames/s. */
const COARSE_ABOVE_HZ = 500;

/** The times that the file itself gives, none invented, and what is wrong with them. */
export function checkTimes(raw: RawTimes): { pts: readonly (number | null)[]; findings: readonly Finding[] } {
  const { name } = raw;
  const none = () => raw.pts.map(() => null);
  if (raw.kind === 'stills') {
    const text = `${name}: stills carry no times; state the capture rate or a list of times`;
    return { pts: none(), findings: [{ level: 'note', code: 'timestampsMissing', text }] };
  }
  // AVI stores frames in decode order without times: decoders guess, and disagree, once the orders differ
  if (raw.container === 'avi' && raw.reordered) {
    const text = `${name}: AVI gives no times for footage with B-frames; state the capture rate or a list of times`;
    return { pts: none(), findings: [{ level: 'caution', code: 'timestampsMissing', text }] };
  }
  const findings: Finding[] = [];
  const missing = raw.pts.filter((t) => t === null).length;
  if (missing > 0) {
    const text = `${name}: ${missing} of ${raw.pts.length} frames carry no time; state the capture rate or a list of times`;
    findings.push({ level: 'caution', code: 'timestampsMissing', text });
  }
  const contradiction = firstNotIncreasing(raw.pts);
  if (contradiction !== null) {
    const text = `${name}: the time of frame ${contradiction} is not after the one before; do not use the file's times`;
    findings.push({ level: 'caution', code: 'timestampsContradict', text });
  }
  const rateHz = meanRateHz(raw);
  if (
    raw.container === 'matroska' &&
    raw.timeBase.num / raw.timeBase.den >= 0.001 &&
    rateHz > COARSE_ABOVE_HZ
  ) {
    const text = `${name}: times are rounded to 1 ms at ${Math.round(rateHz)} frames/s; state the capture rate instead`;
    findings.push({ level: 'caution', code: 'timestampsCoarse', text });
  }
  return { pts: raw.pts, findings };
}

/** The first frame whose time is not after the last one given before it. */
export function firstNotIncreasing(pts: readonly (number | null)[]): number | null {
  let before = Number.NEGATIVE_INFINITY;
  for (const [n, t] of pts.entries()) {
    if (t === null) continue;
    if (t <= before) return n;
    before = t;
  }
  return null;
}

function meanRateHz({ pts, timeBase }: RawTimes): number {
  const first = pts[0];
  const last = pts.at(-1);
  if (first == null || last == null || last <= first) return 0;
  return ((pts.length - 1) * timeBase.den) / ((last - first) * timeBase.num);
}
