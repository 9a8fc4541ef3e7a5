import { commonRatesHz } from '../clock/commonRates.ts';
import type { Finding } from '../sheet/result.ts';
import type { Contribution } from '../uncertainty/effectiveDof.ts';
import { expectedBudget, restS, shareInBandwidth } from './expectedBudget.ts';
import { leastFramesInHalfWidth, safeFramesInHalfWidth } from './peakChart.ts';
import { type PlannedQuantity, type PlanOrder, plannedQuantities } from './planSchema.ts';
import { type Rig, settleRig } from './rig.ts';
import { blurPx, chosenExposureS, fastestMps, mostBlurPx, type Shot } from './shot.ts';

/** One wanted quantity: what it will be, how well, and what holds it back. */
export interface PlannedValue {
  readonly quantity: PlannedQuantity;
  readonly unit: string;
  readonly bandwidthHz?: number;
  /** Expected value and standard uncertainty, and the one that was wanted. */
  readonly value: number;
  readonly u: number;
  readonly uWanted: number;
  readonly reached: boolean;
  /** The largest first. */
  readonly contributions: readonly Contribution[];
  /** Source of the largest. */
  readonly limiting: string;
}

export interface Plan {
  readonly captureRateHz: number;
  readonly exposureS: number;
  /** In the field of view as stated, and the fewest that would do; null: more pixels alone do not. */
  readonly pxPerM: number;
  readonly pxPerMNeeded: number | null;
  /** Bar that was reckoned with, and the shortest that would do; null: no bar that fits the field does. */
  readonly barM: number;
  readonly barNeededM: number | null;
  /** Blur of the fastest body at its fastest [px], and its speed. */
  readonly blurPx: number;
  readonly fastestMps: number;
  /** Frames in the half width of the peak; null without a tether. */
  readonly framesInHalfWidth: number | null;
  readonly peak: Rig['tether'];
  readonly filmedS: number;
  readonly frames: number;
  /** One byte for each pixel, uncoded; and coded at 0.2 bit for each pixel, the least at which places are good to 0.025 px. */
  readonly rawBytes: number;
  readonly codedBytes: number;
  readonly values: readonly PlannedValue[];
  readonly findings: readonly Finding[];
}

export type Planned =
  | { readonly ok: true; readonly plan: Plan }
  | { readonly ok: false; readonly problem: string };

const codedBitsPerPx = 0.2;
/** A record is to hold a filter's band ten times (SAE J211-1, sampling at least 10 × the class); four is the least. */
const safeRatePerBandwidth = 10;
const leastRatePerBandwidth = 4;

/**
 * Works out before a test how it is to be filmed so that the wanted uncertainties are reached: the slowest usual rate that does,
 * or the fastest permitted with what then limits.
 */
export function plan(order: PlanOrder): Planned {
  const missing = order.wanted.find((w) => w.quantity.startsWith('tip.') && order.tether === undefined);
  if (missing) return { ok: false, problem: `wanted: ${missing.quantity} needs a tether; state tether` };
  const settled = settleRig(order);
  if (!settled.ok) return settled;
  const { rig } = settled;
  const leastHz = leastRateHz(order, rig);
  if (leastHz > rig.highestCaptureRateHz) return { ok: false, problem: tooSlow(order, rig, leastHz) };

  // Where the camera can, a peak is filmed with three frames in its half width and not with the two that it needs.
  const permitted = [
    ...commonRatesHz.filter((r) => r < rig.highestCaptureRateHz),
    rig.highestCaptureRateHz,
  ].filter(
    (r) =>
      r >= Math.min((leastHz * safeFramesInHalfWidth) / leastFramesInHalfWidth, rig.highestCaptureRateHz),
  );
  const shotAt = (captureRateHz: number, pxPerM = rig.pxPerM, barM = rig.barM): Shot => ({
    captureRateHz,
    pxPerM,
    barM,
    exposureS: chosenExposureS(rig, captureRateHz, pxPerM),
  });
  const captureRateHz = Math.max(
    ...order.wanted.map((_, i) => slowestEnough(permitted, (rate) => valuesOf(order, rig, shotAt(rate))[i])),
  );
  const shot = shotAt(captureRateHz);
  const values = valuesOf(order, rig, shot);
  const reaches = (other: Shot) => valuesOf(order, rig, other).every((v) => v.reached);
  const { tether } = rig;
  const framesInHalfWidth = tether ? captureRateHz * tether.halfWidthS : null;
  const filmedS = restS + Math.max(fallS(rig), tether ? tether.extensionS + 4 * tether.halfWidthS : 0);
  const frames = Math.ceil(filmedS * captureRateHz);
  const pixels = frames * rig.widthPx * rig.heightPx;
  const plan: Omit<Plan, 'findings'> = {
    captureRateHz,
    exposureS: shot.exposureS,
    pxPerM: rig.pxPerM,
    pxPerMNeeded: fewest(rig.pxPerM / 50, rig.pxPerM * 20, (px) => reaches(shotAt(captureRateHz, px))),
    barM: rig.barM,
    barNeededM: fewest(rig.fieldHeightM / 100, rig.fieldHeightM, (bar) =>
      reaches(shotAt(captureRateHz, rig.pxPerM, bar)),
    ),
    blurPx: blurPx(rig, shot),
    fastestMps: fastestMps(rig),
    framesInHalfWidth,
    peak: tether,
    filmedS,
    frames,
    rawBytes: pixels,
    codedBytes: (pixels * codedBitsPerPx) / 8,
    values,
  };
  return {
    ok: true,
    plan: { ...plan, findings: [...findingsOf(order, rig, plan), ...settled.findings] },
  };
}

function fallS({ fallM, gMps2 }: Rig): number {
  return Math.sqrt((2 * fallM) / gMps2);
}

/** The peak itself, or the speed at its end, needs two frames in its half width; a bandwidth four frames in its period. */
function leastRateHz(order: PlanOrder, { tether }: Rig): number {
  const each = order.wanted.map((w) => {
    if (w.bandwidthHz !== undefined) return leastRatePerBandwidth * w.bandwidthHz;
    const ofPeak = w.quantity === 'tip.peakAcceleration' || w.quantity === 'tip.peakSpeed';
    return ofPeak && tether ? leastFramesInHalfWidth / tether.halfWidthS : 0;
  });
  return Math.max(...each);
}

function tooSlow(order: PlanOrder, { tether, highestCaptureRateHz }: Rig, leastHz: number): string {
  const band = Math.max(...order.wanted.map((w) => w.bandwidthHz ?? 0));
  const why =
    leastRatePerBandwidth * band >= leastHz
      ? `${leastRatePerBandwidth} frames in the period of ${band} Hz`
      : `${leastFramesInHalfWidth} frames in the half width of the peak, ${(1000 * (tether?.halfWidthS ?? 0)).toPrecision(2)} ms`;
  return `camera.highestCaptureRateHz: ${highestCaptureRateHz} Hz is too slow: ${why}, need at least ${Math.ceil(leastHz)} Hz; below that the figure is the camera's and not the tether's. Use a faster camera, or want the acceleration within a bandwidth (wanted[].bandwidthHz)`;
}

function valuesOf(order: PlanOrder, rig: Rig, shot: Shot): PlannedValue[] {
  return order.wanted.map((w): PlannedValue => {
    const { value, u, contributions } = expectedBudget(w.quantity, rig, shot, w.bandwidthHz);
    const uWanted = w.u ?? (w.uRel ?? 0) * value;
    const sorted = [...contributions].sort((a, b) => b.u - a.u);
    return {
      quantity: w.quantity,
      unit: plannedQuantities[w.quantity],
      ...(w.bandwidthHz === undefined ? {} : { bandwidthHz: w.bandwidthHz }),
      value,
      u,
      uWanted,
      reached: u <= uWanted,
      contributions: sorted,
      limiting: sorted[0]?.source ?? '',
    };
  });
}

/** The slowest rate that reaches what was wanted; if none does, the slowest within 2 % of the best: faster would be footage only. */
function slowestEnough(rates: readonly number[], valueAt: (rate: number) => PlannedValue): number {
  const values = rates.map(valueAt);
  const least = Math.min(...values.map((v) => v.u / v.uWanted));
  const enough = Math.max(1, 1.02 * least);
  return rates[values.findIndex((v) => v.u / v.uWanted <= enough)];
}

/** The smallest value between two ends at which something holds, to 0.5 %; null if it does not hold at the upper one. */
function fewest(low: number, high: number, holds: (value: number) => boolean): number | null {
  if (!holds(high)) return null;
  if (holds(low)) return low;
  let [no, yes] = [low, high];
  while (yes / no > 1.005) {
    const middle = Math.sqrt(no * yes);
    if (holds(middle)) yes = middle;
    else no = middle;
  }
  return yes;
}

function findingsOf(order: PlanOrder, rig: Rig, plan: Omit<Plan, 'findings'>): Finding[] {
  const findings: Finding[] = [];
  const caution = (code: string, text: string) => findings.push({ level: 'caution', code, text });
  for (const v of plan.values) {
    if (v.reached) continue;
    caution(
      'notReached',
      `${v.quantity}: ${percent(v.u / v.value)} is expected, ${percent(v.uWanted / v.value)} was wanted; what limits is: ${v.limiting}.`,
    );
  }
  const peakWanted = order.wanted.some(
    (w) => w.quantity.startsWith('tip.peak') && w.bandwidthHz === undefined,
  );
  const m = plan.framesInHalfWidth;
  if (peakWanted && m !== null && m < safeFramesInHalfWidth) {
    caution(
      'peakThin',
      `Only ${m.toPrecision(2)} frames fall into the half width of the peak: ${safeFramesInHalfWidth} are safe, so film at ${Math.ceil(safeFramesInHalfWidth / (rig.tether?.halfWidthS ?? 1))} Hz or more if the camera can.`,
    );
  }
  for (const { bandwidthHz } of order.wanted) {
    if (bandwidthHz === undefined || !rig.tether) continue;
    if (plan.captureRateHz < safeRatePerBandwidth * bandwidthHz) {
      caution(
        'bandwidthThin',
        `The capture rate is less than ${safeRatePerBandwidth} times the bandwidth of ${bandwidthHz} Hz: film at ${safeRatePerBandwidth * bandwidthHz} Hz or more if the camera can.`,
      );
    }
    const share = shareInBandwidth(bandwidthHz, rig.tether.halfWidthS);
    findings.push({
      level: 'note',
      code: 'shareInBandwidth',
      text: `Within ${bandwidthHz} Hz about ${percent(share)} of the peak itself is seen.`,
    });
  }
  if (plan.blurPx > mostBlurPx) {
    caution(
      'blurLarge',
      `The fastest body is blurred by ${plan.blurPx.toPrecision(2)} px: more than ${mostBlurPx} px is not followed well; use a shorter exposure and more light.`,
    );
  }
  return findings;
}

function percent(share: number): string {
  return `${Number((100 * share).toPrecision(2))} %`;
}
