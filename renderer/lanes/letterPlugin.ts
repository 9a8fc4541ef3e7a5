import type { Plugin } from 'chart.js';

/** Writes each body's letter at its last point inside the lane, so that no curve is told by colour alone. */
export const letterPlugin: Plugin = {
  id: 'curveLetters',
  afterDatasetsDraw(chart) {
    const { ctx, chartArea, data } = chart;
    ctx.save();
    ctx.font = '600 11px system-ui, sans-serif';
    ctx.textBaseline = 'middle';
    const taken: number[] = [];
    data.datasets.forEach((dataset, i) => {
      const letter = dataset.label;
      if (!letter) return;
      const points = chart.getDatasetMeta(i).data;
      const inside = points.filter(
        ({ x, y }) =>
          x >= chartArea.left && x <= chartArea.right && y >= chartArea.top && y <= chartArea.bottom,
      );
      const last = inside.at(-1);
      if (!last) return;
      let x = Math.min(last.x, chartArea.right - 12);
      while (taken.some((other) => Math.abs(other - x) < 11)) x -= 12;
      taken.push(x);
      const at = inside.reduce((best, p) => (Math.abs(p.x - x) < Math.abs(best.x - x) ? p : best), last);
      ctx.lineWidth = 3;
      ctx.strokeStyle = '#fff';
      const y = Math.max(at.y - 8, chartArea.top + 6);
      ctx.strokeText(letter, x, y);
      ctx.fillStyle = String(dataset.borderColor);
      ctx.fillText(letter, x, y);
    });
    ctx.restore();
  },
};
