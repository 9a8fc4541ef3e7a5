import type { Chart } from 'chart.js';
import { useEffect, useRef } from 'preact/hooks';
import { cursorS, type LaneData, shownTime } from '../state/lanes.ts';
import { setCursor } from './cursorPlugin.ts';
import { LaneValues } from './LaneValues.tsx';
import { fillLaneChart, makeLaneChart } from './laneChart.ts';

/** One lane: its curves, and the values at the cursor. */
export function Lane({ lane, isLast }: { readonly lane: LaneData; readonly isLast: boolean }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const chart = useRef<ReturnType<typeof makeLaneChart> | null>(null);
  const { fromS, toS } = shownTime.value;
  const at = cursorS.value;
  useEffect(() => {
    if (!canvas.current) return;
    const made = makeLaneChart(canvas.current, isLast);
    chart.current = made;
    return () => {
      chart.current = null;
      made.destroy();
    };
  }, [isLast]);
  useEffect(() => {
    if (chart.current) fillLaneChart(chart.current, lane, fromS, toS);
  }, [lane, fromS, toS, isLast]);
  useEffect(() => {
    if (chart.current) setCursor(chart.current as unknown as Chart, at);
  }, [at, lane, fromS, toS]);
  return (
    <div class={isLast ? 'lane lane-last' : 'lane'}>
      <canvas ref={canvas} role="img" aria-label={`${lane.name} against time, ${lane.unit}`} />
      <LaneValues lane={lane} />
    </div>
  );
}
