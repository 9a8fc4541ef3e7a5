import type { RelativeSource } from '../motion/worldTrack.ts';
import type { Settled } from '../sheet/assumptions.ts';
import type { Finding } from '../sheet/result.ts';

/** Scale of several bars together. */
export interface BarsTogether {
  readonly metrePerPx: number;
  readonly length: readonly RelativeSource[];
  readonly findings: readonly Finding[];
}

/** Bars that differ by more than so many times what their uncertainties allow contradict each other. */
const agreeing = 2;

/**
 * Least-squares scale of bars: the mean of what each says, weighted with its relative variance. A spread beyond their
 * uncertainties is a finding and widens the uncertainty (Birge ratio).
 *
 * @param each  metres per pixel as each bar has it, and its length in pixels
 */
export function scaleOfBars(
  bars: Settled['bars'],
  each: readonly { readonly metrePerPx: number; readonly lengthPx: number }[],
): BarsTogether {
  const parts = bars.map((bar, i) => ({
    metrePerPx: each[i].metrePerPx,
    uLengthRel: bar.uLengthM / bar.lengthM,
    uMarksRel: (Math.SQRT2 * bar.uMarkPx) / each[i].lengthPx, // two marks, each with uMarkPx along the bar
  }));
  const variances = parts.map((e) => e.uLengthRel ** 2 + e.uMarksRel ** 2);
  const weights = variances.map((v) => (variances.every((w) => w > 0) ? 1 / v : 1));
  const sum = weights.reduce((s, w) => s + w, 0);
  const share = weights.map((w) => w / sum);
  const metrePerPx = parts.reduce((s, e, i) => s + share[i] * e.metrePerPx, 0);
  const combine = (pick: (e: (typeof parts)[number]) => number) =>
    Math.sqrt(parts.reduce((s, e, i) => s + (share[i] * pick(e)) ** 2, 0));
  const length = [
    { source: 'scale bar length', uRel: combine((e) => e.uLengthRel) },
    { source: 'scale bar marks', uRel: combine((e) => e.uMarksRel) },
  ];
  if (parts.length === 1) return { metrePerPx, length, findings: [] };

  const chiSquared = parts.reduce(
    (s, e, i) => s + (e.metrePerPx / metrePerPx - 1) ** 2 / Math.max(variances[i], 1e-12),
    0,
  );
  const birge = Math.sqrt(chiSquared / (parts.length - 1));
  const said = parts.map((e) => e.metrePerPx);
  const spread = `${(100 * (Math.max(...said) / Math.min(...said) - 1)).toPrecision(2)} %`;
  if (birge <= agreeing) {
    const text = `The ${parts.length} scale bars agree within ${spread}, ${birge.toFixed(1)} times what their uncertainties give.`;
    return { metrePerPx, length, findings: [{ level: 'note', code: 'barsAgree', text }] };
  }
  const disagreement = {
    source: 'disagreement of bars',
    uRel: Math.sqrt(birge ** 2 - 1) * Math.hypot(length[0].uRel, length[1].uRel),
  };
  const text = `The scale bars disagree by ${spread}, ${birge.toFixed(1)} times what their uncertainties allow: check marks and lengths.`;
  return {
    metrePerPx,
    length: [...length, disagreement],
    findings: [{ level: 'caution', code: 'barsDisagree', text }],
  };
}
