import { draft } from '../state/draft.ts';
import { selectedMark } from '../state/marks.ts';
import { refinedMark } from '../state/refined.ts';

/** Where the centre of the target at the selected mark is, how well that is known, and whether the sheet takes it. */
export function RefinedPlace() {
  const mark = selectedMark.value;
  const found = refinedMark.value;
  if (mark?.kind !== 'bar' || !mark.at || !found) return null;
  const bar = draft.value.scale.bars[Number(/\d+/.exec(mark.id)?.[0])];
  const isUsed = bar?.refine === true;
  if (!found.ok) {
    return (
      <output class="hint">
        No centre found: {found.reason}.{isUsed ? ' The place as set will be used.' : ''}
      </output>
    );
  }
  const { kind, x, y, uXPx, uYPx } = found;
  return (
    <output class="hint">
      {kind} at x {x.toFixed(3)} ± {uXPx.toFixed(3)}, y {y.toFixed(3)} ± {uYPx.toFixed(3)} px;{' '}
      {isUsed ? 'this is used.' : 'the place as set is used.'}
    </output>
  );
}
