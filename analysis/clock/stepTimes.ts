import type { Finding } from '../sheet/result.ts';

/** Of how many places at most a finding names the frames. */
const placesNamed = 6;
/** A step this far from the usual one is odd: a frame is missing, or two are too close. */
const oddShare = 0.5;
/** A step this far from the usual one is uneven: the rate varies. */
const unevenShare = 0.05;
/** Times rounded to this share of the time between frames say so. */
const coarseShare = 0.01;

/** Median time from frame to frame [s]; NaN with fewer than two frames. */
export function usualStepS(timeS: Float64Array, firstFrame: number, lastFrame: number): number {
  const steps = timeS.slice(firstFrame + 1, lastFrame + 1).map((t, i) => t - timeS[firstFrame + i]);
  steps.sort();
  return steps[steps.length >> 1] ?? Number.NaN;
}

/**
 * What the times of the frames say of themselves: missing frames, frames too close, a rate that varies. The times are used as
 * they are.
 *
 * @param timeS   strictly increasing from first to last [s]
 * @param source  whose times they are, in words
 */
export function stepFindings(
  timeS: Float64Array,
  firstFrame: number,
  lastFrame: number,
  source: string,
): Finding[] {
  const usual = usualStepS(timeS, firstFrame, lastFrame);
  const gaps: number[] = [];
  const close: number[] = [];
  let missing = 0;
  let uneven = 0;
  for (let n = firstFrame + 1; n <= lastFrame; n++) {
    const ratio = (timeS[n] - timeS[n - 1]) / usual;
    if (ratio > 1 + oddShare) {
      gaps.push(n);
      missing += Math.round(ratio) - 1;
    } else if (ratio < 1 - oddShare) close.push(n);
    else if (Math.abs(ratio - 1) > unevenShare) uneven++;
  }
  const steps = lastFrame - firstFrame;
  const usualText = `the usual ${(usual * 1000).toPrecision(4)} ms`;
  const findings: Finding[] = [];
  if (gaps.length > 0) {
    findings.push({
      level: 'caution',
      code: 'framesMissing',
      text: `By ${source}, ${gaps.length} of ${steps} steps from frame to frame are longer than ${usualText} by more than half (${placesText(gaps)}): about ${missing} ${missing === 1 ? 'frame is' : 'frames are'} missing there. The times are used as they are.`,
    });
  }
  if (close.length > 0) {
    findings.push({
      level: 'caution',
      code: 'framesTooClose',
      text: `By ${source}, ${close.length} of ${steps} steps from frame to frame are less than half of ${usualText} (${placesText(close)}): frames may have been copied in. The times are used as they are.`,
    });
  }
  if (uneven > 0) {
    findings.push({
      level: 'note',
      code: 'timesUneven',
      text: `By ${source}, ${uneven} of ${steps} steps from frame to frame differ from ${usualText} by 5 to 50 %: the rate varies, and each frame keeps its own time.`,
    });
  }
  return findings;
}

/** Times that are whole ticks of a coarse time base: what rounding leaves of them. */
export function coarseTimesFinding(tickS: number, usualS: number): Finding[] {
  const share = tickS / usualS;
  if (!(share > coarseShare)) return [];
  return [
    {
      level: share > 0.1 ? 'caution' : 'note',
      code: 'timesRounded',
      text: `The file's own times are whole multiples of ${Number((tickS * 1000).toPrecision(3))} ms, ${Number((100 * share).toPrecision(2))} % of the time between frames: each is uncertain by ${Number(((tickS * 1000) / Math.sqrt(12)).toPrecision(2))} ms. If the camera's rate is constant, state it (clock.kind "captureRate").`,
    },
  ];
}

/** `frames 11 to 12, 40 to 41 and 3 more`. */
export function placesText(frames: readonly number[]): string {
  const named = frames.slice(0, placesNamed).map((n) => `${n - 1} to ${n}`);
  const more = frames.length - named.length;
  return `frames ${named.join(', ')}${more > 0 ? ` and ${more} more` : ''}`;
}
