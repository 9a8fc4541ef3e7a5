import type { Frame } from '../state/frames.ts';

/** Paints a frame pixel for pixel: the canvas has the picture's own size; what makes it larger on the screen is CSS. */
export function paintLuma(canvas: HTMLCanvasElement, frame: Frame): void {
  if (canvas.width !== frame.widthPx) canvas.width = frame.widthPx;
  if (canvas.height !== frame.heightPx) canvas.height = frame.heightPx;
  const context = canvas.getContext('2d', { alpha: false });
  if (!context) return;
  const image = context.createImageData(frame.widthPx, frame.heightPx);
  const { data } = image;
  const { luma } = frame;
  for (let i = 0, o = 0; i < luma.length; i++, o += 4) {
    const grey = luma[i] ?? 0;
    data[o] = grey;
    data[o + 1] = grey;
    data[o + 2] = grey;
    data[o + 3] = 255;
  }
  context.putImageData(image, 0, 0);
}
