import type { Chart, Plugin } from 'chart.js';

export interface Band {
  readonly timeS: readonly number[];
  readonly low: readonly number[];
  readonly high: readonly number[];
  readonly colour: string;
}

/** Bands of each chart; a chart that is gone takes its bands along. */
const bandsOf = new WeakMap<Chart, readonly Band[]>();

export function setBands(chart: Chart, bands: readonly Band[]): void {
  bandsOf.set(chart, bands);
}

/** Fills the space between two curves, under everything else: the 95 % band of an estimate. */
export const bandPlugin: Plugin = {
  id: 'uncertaintyBand',
  beforeDatasetsDraw(chart) {
    const { ctx, chartArea, scales } = chart;
    const { x, y } = scales;
    if (!x || !y) return;
    ctx.save();
    ctx.beginPath();
    ctx.rect(chartArea.left, chartArea.top, chartArea.width, chartArea.height);
    ctx.clip();
    for (const { timeS, low, high, colour } of bandsOf.get(chart) ?? []) {
      ctx.fillStyle = colour;
      for (const [from, to] of unbroken(low, high)) {
        ctx.beginPath();
        for (let i = from; i < to; i++)
          ctx.lineTo(x.getPixelForValue(timeS[i] ?? 0), y.getPixelForValue(high[i] ?? 0));
        for (let i = to - 1; i >= from; i--)
          ctx.lineTo(x.getPixelForValue(timeS[i] ?? 0), y.getPixelForValue(low[i] ?? 0));
        ctx.closePath();
        ctx.fill();
      }
    }
    ctx.restore();
  },
};

/** Stretches [from, to) without a gap: where the estimate has no value, the band has none. */
function unbroken(low: readonly number[], high: readonly number[]): [number, number][] {
  const stretches: [number, number][] = [];
  let from = -1;
  for (let i = 0; i <= low.length; i++) {
    const there = i < low.length && Number.isFinite(low[i]) && Number.isFinite(high[i]);
    if (there && from < 0) from = i;
    if (!there && from >= 0) {
      stretches.push([from, i]);
      from = -1;
    }
  }
  return stretches;
}
