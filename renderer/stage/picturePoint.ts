import type { Point } from '../state/draft.ts';

/**
 * Where a pointer is in the picture [px], integer at pixel centres. A pointer covers one pixel of the screen; its centre counts,
 * so that at 1:1 a click gives whole pixels.
 *
 * @param zoom         screen pixels for one pixel of the picture
 * @param screenScale  screen pixels in a CSS pixel
 */
export function picturePoint(
  event: { readonly clientX: number; readonly clientY: number },
  picture: Element,
  zoom: number,
  screenScale: number,
): Point {
  const box = picture.getBoundingClientRect();
  const along = (client: number, start: number) =>
    (Math.floor((client - start) * screenScale + 1e-6) + 0.5) / zoom - 0.5;
  return { x: along(event.clientX, box.left), y: along(event.clientY, box.top) };
}

/** CSS position of a place in the picture: the centre of pixel 0 is half a pixel from the edge. */
export function cssOf(coordinatePx: number, cssPerPx: number): number {
  return (coordinatePx + 0.5) * cssPerPx;
}
