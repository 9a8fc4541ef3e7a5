import type { Point } from '../state/draft.ts';
import { cssPerPx } from '../state/zoom.ts';
import { cssOf } from './picturePoint.ts';

/** A mark closer to the edge of the view than this counts as out of it [CSS px]. */
const edgeCss = 14;

/** Scrolls so that a place in the picture is in the middle of the view, as far as the picture reaches. */
export function middleOn(at: Point): void {
  const parts = viewAndPicture();
  if (!parts) return;
  const { view, picture } = parts;
  view.scrollLeft = picture.offsetLeft + cssOf(at.x, cssPerPx.value) - view.clientWidth / 2;
  view.scrollTop = picture.offsetTop + cssOf(at.y, cssPerPx.value) - view.clientHeight / 2;
}

/** Scrolls to a place in the picture if it is not in view; else leaves the picture where it is. */
export function bringIntoView(at: Point): void {
  const parts = viewAndPicture();
  if (!parts) return;
  const { view, picture } = parts;
  const x = picture.offsetLeft + cssOf(at.x, cssPerPx.value) - view.scrollLeft;
  const y = picture.offsetTop + cssOf(at.y, cssPerPx.value) - view.scrollTop;
  const isSeen =
    x >= edgeCss && x <= view.clientWidth - edgeCss && y >= edgeCss && y <= view.clientHeight - edgeCss;
  if (!isSeen) middleOn(at);
}

/** Moves the view over the picture by a share of what it shows. */
export function panBy(xShare: number, yShare: number): void {
  const view = viewAndPicture()?.view;
  view?.scrollBy(xShare * view.clientWidth, yShare * view.clientHeight);
}

/** The place in the picture that is in the middle of the view [px], not rounded; also when the picture does not reach it. */
export function seenMiddle(cssPerPxThen: number): Point | null {
  const parts = viewAndPicture();
  if (!parts) return null;
  const { view, picture } = parts;
  return {
    x: (view.scrollLeft + view.clientWidth / 2 - picture.offsetLeft) / cssPerPxThen - 0.5,
    y: (view.scrollTop + view.clientHeight / 2 - picture.offsetTop) / cssPerPxThen - 0.5,
  };
}

function viewAndPicture(): { readonly view: HTMLElement; readonly picture: HTMLElement } | null {
  const view = document.getElementById('stage-view');
  const picture = view?.querySelector('.picture');
  return view && picture instanceof HTMLElement ? { view, picture } : null;
}
