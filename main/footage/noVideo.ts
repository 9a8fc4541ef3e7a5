import { Refusal } from '../refusal.ts';
import type { FootageInput } from './footageInput.ts';

/** Why no picture came out of a file. */
export function noVideo(
  input: FootageInput,
  seen: { readonly hasVideo: boolean; readonly hasOther: boolean; readonly complaint: string | null },
): Refusal {
  const why = seen.complaint === null ? '' : ` (${seen.complaint})`;
  if (seen.hasVideo) {
    return new Refusal(
      'footageWithoutFrames',
      3,
      `${input.name}: holds a video but no frame of it can be decoded${why}; copy it from the camera again`,
    );
  }
  if (seen.hasOther) {
    return new Refusal(
      'footageNotVideo',
      3,
      `${input.name}: holds sound or data but no video; choose the camera's video file`,
    );
  }
  return new Refusal(
    'footageNotVideo',
    3,
    `${input.name}: is not a video that can be read, or its end is missing${why}; copy it again or give MP4, MOV, AVI, MKV or stills`,
  );
}
