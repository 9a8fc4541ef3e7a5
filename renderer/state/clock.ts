import { computed } from '@preact/signals';
import { frameTimes } from '../../analysis/clock/frameTimes.ts';
import { draft } from './draft.ts';
import { footage } from './footage.ts';
import { frameNumber } from './frames.ts';
import { resultFrame } from './reduction.ts';

/** Time of each frame by the sheet's clock as it stands [s]; null while the clock is not stated or needs a file that only the reduction reads. */
const sheetTimeS = computed<Float64Array | null>(() => {
  const shown = footage.value;
  const { clock } = draft.value;
  if (!shown) return null;
  // The file's times are passed in seconds, so a tick is one second.
  const coded = { pts: shown.timeS, timeBase: { num: 1, den: 1 } };
  if (clock.kind === 'captureRate' && clock.captureRateHz !== undefined && clock.captureRateHz > 0) {
    const stated = { kind: clock.kind, captureRateHz: clock.captureRateHz };
    const times = frameTimes(stated, coded, null, 0, shown.frameCount - 1);
    return times.ok ? times.timeS : null;
  }
  if (clock.kind === 'container') {
    const times = frameTimes({ kind: 'container' }, coded, null, 0, shown.frameCount - 1);
    return times.ok ? times.timeS : null;
  }
  return null;
});

/** Time of the frame that is shown [s]: the result's own where there is one for the clock as stated. */
export const frameTimeS = computed<number | null>(() => {
  const bySheet = sheetTimeS.value?.[frameNumber.value];
  if (bySheet !== undefined && Number.isFinite(bySheet)) return bySheet;
  return draft.value.clock.kind === 'timestamps' ? (resultFrame.value?.timeS ?? null) : null;
});
