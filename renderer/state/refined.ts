import { effect, signal } from '@preact/signals';
import { type NotRefined, type RefinedMark, refineMark } from '../../analysis/scale/mark/refineMark.ts';
import { shownFrame } from './frames.ts';
import { selectedMark } from './marks.ts';

/** Waits until a mark rests: the search takes about a tenth of a second and is not wanted at every step of a drag. */
const restMs = 200;

/** The centre of the target under the selected mark of a scale bar, in the frame that is shown; null while it is not known. */
export const refinedMark = signal<RefinedMark | NotRefined | null>(null);

effect(() => {
  const mark = selectedMark.value;
  const frame = shownFrame.value;
  refinedMark.value = null;
  if (mark?.kind !== 'bar' || !mark.at || !frame) return;
  const { at } = mark;
  const timer = setTimeout(() => {
    refinedMark.value = refineMark({ ...frame, bitDepth: 8 }, at);
  }, restMs);
  return () => clearTimeout(timer);
});
