import {
  Chart,
  type ChartDataset,
  LinearScale,
  LineController,
  LineElement,
  type Point,
  PointElement,
} from 'chart.js';
import { theoryNames } from '../parts/theoryNames.ts';
import type { LaneData, Trace } from '../state/lanes.ts';
import { bandPlugin, setBands } from './bandPlugin.ts';
import { bodyLooks, otherLook, theoryColour } from './colours.ts';
import { cursorPlugin } from './cursorPlugin.ts';
import { withGaps } from './gaps.ts';
import { laneRange } from './laneRange.ts';
import { letterPlugin } from './letterPlugin.ts';

Chart.register(LineController, LineElement, PointElement, LinearScale);

/** Width of the value axis: the same in every lane, so that their plot areas stand under each other [CSS px]. */
export const gutterPx = 62;
/** Plot areas end this far from the right edge [CSS px]. */
export const rightPx = 10;
/** Room above a plot area for the lane's name and values [CSS px]. */
const headPx = 17;
/** Height of the time axis, where it is shown [CSS px]. */
const timeAxisPx = 24;
/** Standard deviations of a 95 % band. */
const k95 = 1.96;

export type LaneChart = Chart<'line', Point[]>;

export function makeLaneChart(canvas: HTMLCanvasElement, isLast: boolean): LaneChart {
  return new Chart<'line', Point[]>(canvas, {
    type: 'line',
    data: { datasets: [] },
    plugins: [bandPlugin, letterPlugin, cursorPlugin],
    options: {
      animation: false,
      responsive: true,
      maintainAspectRatio: false,
      parsing: false,
      normalized: true,
      events: [],
      layout: { padding: { top: headPx, right: rightPx } },
      scales: {
        x: {
          type: 'linear',
          afterFit: (scale) => {
            scale.height = isLast ? timeAxisPx : 1;
          },
          ticks: {
            display: isLast,
            callback: tickText,
            maxRotation: 0,
            color: '#333',
            font: { size: 11 },
            autoSkipPadding: 24,
            includeBounds: false,
          },
          grid: { color: '#e4e7ea', drawTicks: isLast, tickLength: 4 },
          border: { color: '#8a939c' },
          title: { display: false },
        },
        y: {
          type: 'linear',
          afterFit: (scale) => {
            scale.width = gutterPx;
          },
          ticks: {
            callback: tickText,
            color: '#333',
            font: { size: 11 },
            maxTicksLimit: 5,
            includeBounds: false,
          },
          grid: { color: '#e4e7ea', drawTicks: false },
          border: { color: '#8a939c' },
        },
      },
    },
  });
}

/** A tick as printed: a true minus, no marks between thousands (a comma is a decimal mark to many), no rounding noise. */
function tickText(value: number | string): string {
  return String(Number(Number(value).toPrecision(10))).replace('-', '\u2212');
}

/** Gives a chart a lane's curves for the time that is shown; the caller draws the cursor. */
export function fillLaneChart(chart: LaneChart, lane: LaneData, fromS: number, toS: number): void {
  chart.data.datasets = [
    ...lane.traces.map(pointsDataset),
    ...lane.theory.map(
      (t): ChartDataset<'line', Point[]> => ({
        data: xy(t.timeS, t.value),
        borderColor: theoryColour,
        borderWidth: 1.25,
        borderDash: [...theoryNames[t.model].dash],
        pointRadius: 0,
      }),
    ),
    ...lane.traces.map(curveDataset),
  ];
  setBands(
    chart as Chart,
    lane.traces.map(({ timeS, value, u, role }) => {
      const edge = (side: 1 | -1) =>
        withGaps(
          timeS,
          value.map((v, i) => v + side * k95 * (u[i] ?? Number.NaN)),
        );
      const low = edge(-1);
      return {
        timeS: low.map((p) => p.x),
        low: low.map((p) => p.y),
        high: edge(1).map((p) => p.y),
        colour: (bodyLooks[role] ?? otherLook).band,
      };
    }),
  );
  const { x, y } = chart.options.scales ?? {};
  const range = laneRange(lane, fromS, toS);
  if (x) Object.assign(x, { min: fromS, max: toS });
  if (y) Object.assign(y, range);
  chart.update('none');
}

function curveDataset({ letter, role, timeS, value }: Trace): ChartDataset<'line', Point[]> {
  const look = bodyLooks[role] ?? otherLook;
  return {
    label: letter,
    data: withGaps(timeS, value),
    borderColor: look.colour,
    borderWidth: 1.75,
    borderDash: [...look.dash],
    pointRadius: 0,
  };
}

function pointsDataset({ role, points }: Trace): ChartDataset<'line', Point[]> {
  const look = bodyLooks[role] ?? otherLook;
  return {
    data: points.map((p) => ({ x: p.timeS, y: p.value })),
    showLine: false,
    pointRadius: 1.5,
    pointStyle: role === 'tip' ? 'circle' : 'rect',
    pointBackgroundColor: look.points,
    pointBorderWidth: 0,
  };
}

function xy(timeS: readonly number[], value: readonly number[]): Point[] {
  return timeS.map((x, i) => ({ x, y: value[i] ?? Number.NaN }));
}
