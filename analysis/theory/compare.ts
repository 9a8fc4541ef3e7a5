import { chiSquaredTail } from '../fit/chiSquaredTail.ts';
import type { Finding } from '../sheet/result.ts';
import type { FittedModel } from './fitModel.ts';

/** A right model's chi-squared is larger than this once in a thousand drops: above, it does not describe the drop. */
const describesAbove = 1e-3;
/** A model is excluded when chance would make its chi-squared so large less than once in a hundred thousand drops. */
const excludedBelow = 1e-5;
/** A special case is refused when chance would make so large a rise of chi-squared less than once in a thousand drops. */
const specialRefusedBelow = 1e-3;
/** Difference of the information criterion that counts as decisive (Burnham & Anderson 2002, 2.6). */
const decisive = 10;

/**
 * Akaike's information criterion with the correction for few points, for residuals of known variance: χ² + 2k + 2k(k+1)/(n-k-1)
 * (Hurvich & Tsai 1989).
 */
export function aicc({ solution, freeCount, dataCount }: FittedModel): number {
  const k = freeCount;
  const room = dataCount - k - 1;
  return room > 0 ? solution.chiSquared + 2 * k + (2 * k * (k + 1)) / room : Number.POSITIVE_INFINITY;
}

/** How a fitted model stands against the drop and its rivals. */
export interface Standing {
  readonly fitted: FittedModel;
  readonly aicc: number;
  /** Probability of a chi-squared at least as large if the model were right. */
  readonly tail: number;
  readonly describes: boolean;
  readonly excluded: boolean;
  readonly off: Off;
}

/** By how many uncertainties (root mean square) a model is off, and from when on; null: here and there. */
interface Off {
  readonly fromS: number | null;
  readonly times: number;
}

/** Models fitted to one body on the same points, the best by information criterion first. */
export function standings(fits: readonly FittedModel[], timeS: Float64Array): Standing[] {
  return fits
    .map((fitted) => {
      const tail = chiSquaredTail(fitted.solution.chiSquared, fitted.dof);
      return {
        fitted,
        aicc: aicc(fitted),
        tail,
        describes: tail >= describesAbove,
        excluded: tail < excludedBelow,
        off: offFrom(fitted.standardised, timeS),
      };
    })
    .sort((a, b) => a.aicc - b.aicc);
}

/** What the comparison comes to, in plain sentences; one finding for one body. */
export function comparison(ranked: readonly Standing[], bodyId: string): Finding[] {
  const [best, ...others] = ranked;
  if (!best) return [];
  const describing = ranked.filter((s) => s.describes);
  const sentences =
    describing.length === 0
      ? [
          `No model describes the fall of "${bodyId}" within its uncertainty; the nearest is ${best.fitted.model.title} (${figures(best)})${offText(best.off)}`,
          ...others
            .filter((s) => s.excluded)
            .map((s) => `${s.fitted.model.title} is further away (${figures(s)})`),
        ]
      : [
          ...describing.map((s, i) =>
            i === 0
              ? `${s.fitted.model.title} describes the fall of "${bodyId}" (${figures(s)})`
              : besides(s, describing[0], ranked),
          ),
          ...ranked
            .filter((s) => !s.describes)
            .map((s) =>
              s.excluded
                ? `${s.fitted.model.title} is excluded${offText(s.off)}`
                : `${s.fitted.model.title} does not describe it (${figures(s)})`,
            ),
        ];
  const text = `${sentences.map((s, i) => (i === 0 ? capital(s) : s)).join('; ')}.`;
  return [{ level: 'note', code: describing.length === 0 ? 'theoryNone' : 'theoryCompared', text }];
}

/** How a second model that describes the drop stands to the best: refused by a likelihood ratio, by the criterion, or not told apart. */
function besides(s: Standing, best: Standing, ranked: readonly Standing[]): string {
  const general = ranked.find((r) => s.fitted.model.specialCaseOf.includes(r.fitted.model.name));
  const ratio = general && likelihoodRatio(s.fitted, general.fitted);
  if (general && ratio && ratio.tail < specialRefusedBelow)
    return `${s.fitted.model.title} is refused as its special case (likelihood ratio ${ratio.rise.toPrecision(3)} on ${ratio.dof})`;
  const worse = s.aicc - best.aicc;
  if (worse > decisive)
    return `${s.fitted.model.title} is much less likely (information criterion larger by ${worse.toPrecision(2)})`;
  return `${s.fitted.model.title} cannot be told from it (information criterion larger by ${worse.toFixed(1)})`;
}

/** Likelihood-ratio test of a special case against the more general model: the rise of chi-squared and its probability by chance. */
function likelihoodRatio(special: FittedModel, general: FittedModel) {
  const rise = Math.max(0, special.solution.chiSquared - general.solution.chiSquared);
  const dof = general.freeCount - special.freeCount;
  if (dof <= 0) return null;
  return { rise, dof, tail: chiSquaredTail(rise, dof) };
}

/** Residuals of this many uncertainties, over a stretch, are no chance. */
const offTimes = 2;
const leastStretch = 5;

/** The stretch up to the end over which the residuals, root mean square of a running window, stay above two uncertainties. */
function offFrom(standardised: Float64Array, timeS: Float64Array): Off {
  const n = standardised.length;
  const width = Math.max(leastStretch, Math.round(n / 25));
  const rms = (from: number, to: number) =>
    Math.sqrt(standardised.subarray(from, to).reduce((sum, r) => sum + r * r, 0) / (to - from));
  let from = n;
  for (let i = n - width; i >= 0 && rms(i, i + width) > offTimes; i--) from = i;
  return from > n - width ? { fromS: null, times: rms(0, n) } : { fromS: timeS[from], times: rms(from, n) };
}

function offText({ fromS, times }: Off): string {
  const from = fromS === null ? '' : ` from ${fromS.toFixed(3)} s on`;
  return `: its residuals are ${times.toFixed(times < 10 ? 1 : 0)} times the uncertainty${from}`;
}

const figures = ({ fitted }: Standing) =>
  `chi-squared ${fitted.solution.chiSquared.toPrecision(3)} on ${fitted.dof} degrees of freedom`;
const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);
