import { formatMeasured } from '../../analysis/uncertainty/formatMeasured.ts';
import { cursorS, type LaneData, type Trace } from '../state/lanes.ts';

const k95 = 1.96;

/** What the lane is, and each body's value at the cursor with its 95 % interval. */
export function LaneValues({ lane }: { readonly lane: LaneData }) {
  const at = cursorS.value;
  return (
    <div class="lane-values">
      <span class="lane-name">
        {lane.name} <span class="hint">{lane.unit}</span>
      </span>
      {at === null
        ? null
        : lane.traces.map((trace) => (
            <span key={trace.id} class={`figures ink-text-${trace.role}`}>
              {trace.letter} {valueAt(trace, at, lane.unit) ?? 'no value'}
            </span>
          ))}
    </div>
  );
}

/** Null where the body has no value in that frame; rolling shutters give each body a time of its own, within a frame's. */
function valueAt({ timeS, value, u }: Trace, atS: number, unit: string): string | null {
  let nearest = -1;
  for (let i = 0; i < timeS.length; i++)
    if (nearest < 0 || Math.abs((timeS[i] ?? 0) - atS) < Math.abs((timeS[nearest] ?? 0) - atS)) nearest = i;
  const stepS = Math.abs((timeS[1] ?? 0) - (timeS[0] ?? 0));
  const there = timeS[nearest];
  const v = value[nearest];
  if (there === undefined || v === undefined || Math.abs(there - atS) > stepS / 2 || !Number.isFinite(v))
    return null;
  return formatMeasured(v, k95 * (u[nearest] ?? Number.NaN), unit);
}
