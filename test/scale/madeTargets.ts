import type { Picture } from '../../analysis/track/track.ts';
import { seededRandom } from '../../fixtures/random.ts';

/** Light of a scene at a place [px], 0 … 255, by its share inside a sample of the given side (for sharp edges). */
export type Scene = (x: number, y: number, sidePx: number) => number;

const samplesPerPx = 16;

/** How much of a small sample lies inside an edge at a signed distance. */
const inside = (distance: number, side: number) => Math.min(1, Math.max(0, 0.5 + distance / side));

export function quadrantScene(
  x0: number,
  y0: number,
  turnRad: number,
  dark = 40,
  light = 210,
  leanRad = 0,
): Scene {
  return (x, y, side) => {
    const [c, s] = [Math.cos(turnRad), Math.sin(turnRad)];
    const [c2, s2] = [-Math.sin(turnRad + leanRad), Math.cos(turnRad + leanRad)];
    const a = 2 * inside((x - x0) * c + (y - y0) * s, side) - 1;
    const b = 2 * inside((x - x0) * c2 + (y - y0) * s2, side) - 1;
    return dark + ((light - dark) * (1 + a * b)) / 2;
  };
}

/** A quadrant target on a disc of finite size, on grey. */
export function quadrantDiscScene(x0: number, y0: number, turnRad: number, radiusPx: number): Scene {
  const within = quadrantScene(x0, y0, turnRad);
  return (x, y, side) => {
    const cover = inside(radiusPx - Math.hypot(x - x0, y - y0), side);
    return 120 + cover * (within(x, y, side) - 120);
  };
}

export function crossScene(
  x0: number,
  y0: number,
  turnRad: number,
  widthPx: number,
  dark = 40,
  light = 210,
): Scene {
  return (x, y, side) => {
    const [c, s] = [Math.cos(turnRad), Math.sin(turnRad)];
    const [p, q] = [(x - x0) * c + (y - y0) * s, (y - y0) * c - (x - x0) * s];
    const a = inside(widthPx / 2 - Math.abs(p), side);
    const b = inside(widthPx / 2 - Math.abs(q), side);
    return light + (dark - light) * (1 - (1 - a) * (1 - b));
  };
}

/** An ellipse with its longer axis along x. */
export function discScene(
  x0: number,
  y0: number,
  radiusPx: number,
  stretch = 1,
  dark = 40,
  light = 210,
): Scene {
  return (x, y, side) => {
    const [u, v] = [(x - x0) / stretch, y - y0];
    const r = Math.hypot(u, v);
    // distance over the length of its gradient
    const grade = r === 0 ? 1 : Math.hypot(u / stretch, v) / r;
    return light + (dark - light) * inside((radiusPx - r) / grade, side);
  };
}

export function edgeScene(x0: number, y0: number, normalRad: number, dark = 40, light = 210): Scene {
  return (x, y, side) =>
    dark + (light - dark) * inside((x - x0) * Math.cos(normalRad) + (y - y0) * Math.sin(normalRad), side);
}

/**
 * What a sensor of square pixels sees of a scene through a Gaussian blur, as numbers: 16 × 16 samples to a pixel, each weighted with
 * the Gaussian and the pixel's area. Samples lie symmetrically about the pixel's centre, and so do the weights.
 */
export function lightOf(scene: Scene, widthPx: number, heightPx: number, sigmaPx: number): Float64Array {
  const margin = Math.ceil(4 * sigmaPx + 0.5);
  const weights = Float64Array.from({ length: 2 * margin * samplesPerPx }, (_, k) => {
    const x = (k + 0.5) / samplesPerPx - margin;
    let sum = 0;
    for (let i = 0; i < 32; i++) sum += Math.exp(-0.5 * ((x - ((i + 0.5) / 32 - 0.5)) / sigmaPx) ** 2);
    return sum;
  });
  const whole = weights.reduce((s, w) => s + w, 0);
  const rows = (heightPx + 2 * margin) * samplesPerPx;
  const across = new Float64Array(rows * widthPx);
  const line = new Float64Array((widthPx + 2 * margin) * samplesPerPx);
  for (let r = 0; r < rows; r++) {
    const y = (r + 0.5) / samplesPerPx - 0.5 - margin;
    for (let k = 0; k < line.length; k++) {
      line[k] = scene((k + 0.5) / samplesPerPx - 0.5 - margin, y, 1 / samplesPerPx);
    }
    for (let px = 0; px < widthPx; px++) {
      // the pixel's centre is `margin + 0.5` pixels from the line's start, the weights' middle `margin`
      const from = (px + 0.5) * samplesPerPx;
      let sum = 0;
      for (let k = 0; k < weights.length; k++) sum += weights[k] * line[from + k];
      across[r * widthPx + px] = sum / whole;
    }
  }
  const out = new Float64Array(widthPx * heightPx);
  for (let py = 0; py < heightPx; py++) {
    const from = (py + 0.5) * samplesPerPx;
    for (let px = 0; px < widthPx; px++) {
      let sum = 0;
      for (let k = 0; k < weights.length; k++) sum += weights[k] * across[(from + k) * widthPx + px];
      out[py * widthPx + px] = sum / whole;
    }
  }
  return out;
}

/** A frame of 8 bits with Gaussian noise. */
export function photo(
  light: Float64Array,
  widthPx: number,
  heightPx: number,
  noise: number,
  seed: number,
): Picture {
  const random = seededRandom(seed);
  const luma = Uint8Array.from(light, (v) =>
    Math.max(0, Math.min(255, Math.round(v + noise * random.gaussian()))),
  );
  return { widthPx, heightPx, bitDepth: 8, luma };
}
