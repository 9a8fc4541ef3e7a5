import type { Chart, Plugin } from 'chart.js';

const cursorOf = new WeakMap<Chart, number | null>();

/** Moves the cursor line of a chart [s]; null takes it away. */
export function setCursor(chart: Chart, timeS: number | null): void {
  if (cursorOf.get(chart) === timeS) return;
  cursorOf.set(chart, timeS);
  chart.draw();
}

/** A line at the time of the frame that is shown, over the whole height of the canvas: lanes stand edge to edge, so it runs through all. */
export const cursorPlugin: Plugin = {
  id: 'cursorLine',
  afterDatasetsDraw(chart) {
    const timeS = cursorOf.get(chart);
    const x = chart.scales.x;
    if (timeS === null || timeS === undefined || !x) return;
    const at = x.getPixelForValue(timeS);
    if (at < chart.chartArea.left - 0.5 || at > chart.chartArea.right + 0.5) return;
    const { ctx } = chart;
    ctx.save();
    ctx.strokeStyle = '#000';
    ctx.lineWidth = 1;
    ctx.beginPath();
    ctx.moveTo(Math.round(at) + 0.5, 0);
    ctx.lineTo(Math.round(at) + 0.5, chart.chartArea.bottom);
    ctx.stroke();
    ctx.restore();
  },
};
