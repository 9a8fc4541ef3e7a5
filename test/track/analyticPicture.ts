import type { Picture } from '../../analysis/track/track.ts';

/**
 * A band-limited pattern sampled at pixel centres after an exact shift: a sum of plane waves, each shorter than half the
 * sampling frequency, shifted by their phases (shift theorem of the Fourier transform). Truth independent of any renderer.
 * The window around it makes it a body on an even ground.
 */
export function waves(size: number, shiftX: number, shiftY: number, bitDepth = 16): Picture {
  const middle = (size - 1) / 2;
  const luma = new Uint16Array(size * size);
  const scale = (2 ** bitDepth - 1) / 255;
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) {
      const x = column - middle - shiftX;
      const y = row - middle - shiftY;
      // Wavelengths of 7 to 19 px, directions and phases fixed.
      const v =
        24 * Math.sin((2 * Math.PI * (x + 0.4 * y)) / 9 + 0.3) +
        21 * Math.sin((2 * Math.PI * (0.7 * x - y)) / 11 + 1.1) +
        18 * Math.sin((2 * Math.PI * (x - 0.2 * y)) / 19 + 2.2) +
        12 * Math.sin((2 * Math.PI * (0.3 * x + y)) / 7 + 0.7);
      luma[row * size + column] = Math.round(scale * (128 + v));
    }
  }
  return { widthPx: size, heightPx: size, bitDepth, luma };
}

/** A Gaussian spot, symmetric about an exactly known place, on an even ground. */
export function spot(size: number, xPx: number, yPx: number, sigmaPx: number): Picture {
  const luma = new Uint16Array(size * size);
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) {
      const r2 = (column - xPx) ** 2 + (row - yPx) ** 2;
      luma[row * size + column] = Math.round(2000 + 40000 * Math.exp(-r2 / (2 * sigmaPx * sigmaPx)));
    }
  }
  return { widthPx: size, heightPx: size, bitDepth: 16, luma };
}
