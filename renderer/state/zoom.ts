import { computed, signal } from '@preact/signals';
import { footage } from './footage.ts';

/** Screen pixels for one pixel of the picture: a whole number, or 'fit' to see all of it. */
export const zoom = signal<number | 'fit'>('fit');
export const zooms = [1, 2, 3, 4, 6, 8] as const;
/** Size of the room for the picture [CSS px]. */
export const room = signal({ widthPx: 0, heightPx: 0 });
/** Screen pixels in a CSS pixel: what counts for true pixels is the screen's. */
export const screenScale = signal(1);

/** Screen pixels for one pixel of the picture as it is shown. 'fit' takes a whole number where the picture is small enough. */
export const shownZoom = computed(() => {
  if (zoom.value !== 'fit') return zoom.value;
  const size = footage.value;
  if (!size || room.value.widthPx === 0) return 1;
  const fits = Math.min(
    (room.value.widthPx * screenScale.value) / size.widthPx,
    (room.value.heightPx * screenScale.value) / size.heightPx,
  );
  return fits >= 1 ? Math.min(Math.floor(fits), 8) : fits;
});

/** CSS pixels for one pixel of the picture. */
export const cssPerPx = computed(() => shownZoom.value / screenScale.value);

export function zoomBy(steps: 1 | -1): void {
  const now = shownZoom.peek();
  const next = steps > 0 ? zooms.find((z) => z > now) : [...zooms].reverse().find((z) => z < now);
  if (next !== undefined) zoom.value = next;
}

/** Follows the screen's pixel density, which changes when the window moves to another screen. */
export function followScreen(): void {
  screenScale.value = window.devicePixelRatio;
  matchMedia(`(resolution: ${window.devicePixelRatio}dppx)`).addEventListener('change', followScreen, {
    once: true,
  });
}
