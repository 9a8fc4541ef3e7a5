import type { Finding } from '../sheet/result.ts';
import { type CameraShift, makeShiftGauge, type ShiftGauge } from './cameraShift.ts';
import type { Plate } from './match.ts';
import { plateFrom, type RestPlace } from './plate.ts';
import type { SampledFrame } from './sampling.ts';
import { shiftableImage } from './shiftImage.ts';

/** A shift by less than this is no movement of the camera, nor worth registering [px]. */
const leastShiftPx = 0.05;
/** A camera that moves further is a moving camera: the plate is given up. */
const mostShiftPx = 3;
/** … and so is one whose background is not found again in this share of the frames. */
const mostUnfound = 0.2;

/** What the sampled frames say of the camera. */
export type Camera =
  | { readonly kind: 'still'; readonly finding: Finding | null }
  | {
      readonly kind: 'shaken';
      readonly gauge: ShiftGauge;
      readonly shifts: readonly (CameraShift | null)[];
      readonly finding: Finding;
    }
  | { readonly kind: 'moving'; readonly finding: Finding };

/** Judges from frames spread over the footage whether the camera stood still. */
export function judgeCamera(frames: readonly SampledFrame[], bodies: readonly RestPlace[]): Camera {
  const gauge = frames.length > 1 ? makeShiftGauge(frames[0].picture, bodies) : null;
  if (!gauge) {
    const text = 'The background shows too little structure to tell whether the camera stood still.';
    return { kind: 'still', finding: { level: 'note', code: 'cameraNotChecked', text } };
  }
  let last = { xPx: 0, yPx: 0 };
  const shifts = frames.map(({ picture }) => {
    const shift = gauge(picture, last);
    if (shift) last = shift;
    return shift;
  });
  const found = shifts.filter((s) => s !== null);
  const farthest = Math.max(...found.map((s) => Math.hypot(s.xPx, s.yPx)));
  if (found.length < (1 - mostUnfound) * shifts.length || farthest > mostShiftPx) {
    const text = `The camera moved during the drop${farthest > mostShiftPx ? ` (by ${farthest.toFixed(1)} px)` : ''}: bodies were followed without the picture of the background, and their places are relative to the picture, not to the rig. Mount the camera apart from the rig.`;
    return { kind: 'moving', finding: { level: 'caution', code: 'cameraMoving', text } };
  }
  const significant = found.some((s) => Math.hypot(s.xPx, s.yPx) > Math.max(leastShiftPx, 5 * s.uPx));
  if (!significant) return { kind: 'still', finding: null };
  const text = `The camera moved by up to ${farthest.toFixed(2)} px during the drop: every frame was registered to the first. Check what shook it.`;
  return { kind: 'shaken', gauge, shifts, finding: { level: 'caution', code: 'cameraShaken', text } };
}

/** Frames moved back by their shifts, so that a plate can be made of them; frames without a shift are left out. */
export function registered(
  frames: readonly SampledFrame[],
  shifts: readonly (CameraShift | null)[],
): SampledFrame[] {
  return frames.flatMap((frame, i) => {
    const shift = shifts[i];
    if (!shift) return [];
    const { picture } = frame;
    const level = shiftableImage(picture.luma, picture.widthPx, picture.heightPx).shifted(
      -shift.xPx,
      -shift.yPx,
    );
    const most = 2 ** picture.bitDepth - 1;
    const luma = picture.luma.map((_, at) => Math.min(most, Math.max(0, Math.round(level[at]))));
    return [{ ...frame, picture: { ...picture, luma } }];
  });
}

/** The plate as a shaken camera sees it in each frame. */
export interface ShakenPlate {
  plateAt(shift: CameraShift): Plate;
}

/** Shifts closer than this to the last one share its plate: less than a tenth of what a position is uncertain by [px]. */
const samePx = 0.002;

export function shakenPlate(plate: Plate): ShakenPlate {
  const image = shiftableImage(plate.level, plate.widthPx, plate.heightPx);
  let last: { xPx: number; yPx: number; plate: Plate } = { xPx: 0, yPx: 0, plate };
  return {
    plateAt({ xPx, yPx }) {
      if (Math.hypot(xPx - last.xPx, yPx - last.yPx) > samePx) {
        last = { xPx, yPx, plate: plateFrom(image.shifted(xPx, yPx), plate.widthPx, plate.heightPx) };
      }
      return last.plate;
    },
  };
}
