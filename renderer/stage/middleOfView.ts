import type { Point } from '../state/draft.ts';
import { footage } from '../state/footage.ts';
import { cssPerPx } from '../state/zoom.ts';

/** The whole pixel in the middle of what is seen of the picture. */
export function middleOfView(): Point | null {
  const view = document.getElementById('stage-view');
  const picture = view?.querySelector('.picture');
  const size = footage.value;
  if (!view || !picture || !size) return null;
  const seen = view.getBoundingClientRect();
  const whole = picture.getBoundingClientRect();
  const middle = (from: number, to: number, start: number) =>
    Math.floor(((from + to) / 2 - start) / cssPerPx.value);
  return {
    x: middle(Math.max(seen.left, whole.left), Math.min(seen.right, whole.right), whole.left),
    y: middle(Math.max(seen.top, whole.top), Math.min(seen.bottom, whole.bottom), whole.top),
  };
}
