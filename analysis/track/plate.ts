import type { Plate } from './match.ts';
import type { SampledFrame } from './sampling.ts';
import { slopesOf } from './spline.ts';
import type { Picture } from './track.ts';

/** A place where a body rested: frames in which it is still there say nothing of what is behind it. */
export interface RestPlace {
  readonly xPx: number;
  readonly yPx: number;
  readonly radiusPx: number;
  /** The frame that shows the body there. */
  readonly picture: Picture;
}

/** With fewer frames than this a median may still show a body. */
const leastFrames = 7;
/** Above this correlation with the frame that shows it, the body is taken to be still at its place. */
const stillThere = 0.6;

/** Side of the blocks in which frames about a rest place are held against each other [px]. */
const blockPx = 8;
/** Frames differ by no more than this factor on what two frames of the same differ by: 64 pixels tell that to 9 %. */
const mostApart = 1.4;

/**
 * The still background: at each pixel the mean of the middle half of the sampled frames' grey levels, so that a body that
 * passes does not count. Around a rest place only frames count in which the body has left it.
 *
 * @returns null when there are too few frames for it
 * Cost O(pixels · frames²) for few frames (insertion sort), 31 frames: about 0.4 µs a pixel.
 */
export function plateOf(frames: readonly SampledFrame[], rests: readonly RestPlace[]): Plate | null {
  if (frames.length < leastFrames) return null;
  const { widthPx, heightPx } = frames[0].picture;
  const lumas = frames.map((f) => f.picture.luma);
  const level = new Float32Array(widthPx * heightPx);
  const values = new Float64Array(frames.length);
  for (let i = 0; i < level.length; i++) level[i] = middleMean(lumas, i, values);

  for (const rest of rests) {
    const left = frames
      .filter((f) => likeness(f.picture, rest) < stillThere)
      .map(({ picture }) => ({ luma: picture.luma, brightness: brightnessOf(picture, { level }) }));
    if (left.length < leastFrames || left.length === lumas.length) continue;
    const r = Math.ceil(rest.radiusPx);
    const [cx, cy] = [Math.round(rest.xPx), Math.round(rest.yPx)];
    const [toX, toY] = [Math.min(widthPx - 1, cx + r), Math.min(heightPx - 1, cy + r)];
    for (let y = Math.max(0, cy - r); y <= toY; y += blockPx) {
      for (let x = Math.max(0, cx - r); x <= toX; x += blockPx) {
        const block = {
          fromX: x,
          fromY: y,
          toX: Math.min(toX, x + blockPx - 1),
          toY: Math.min(toY, y + blockPx - 1),
        };
        const alike = agreeing(left, block, widthPx);
        const used = alike.length < leastFrames ? left.map((f) => f.luma) : alike;
        for (let j = y; j <= block.toY; j++) {
          for (let i = x; i <= block.toX; i++)
            level[j * widthPx + i] = middleMean(used, j * widthPx + i, values);
        }
      }
    }
  }
  return plateFrom(level, widthPx, heightPx);
}

/** A plate of known levels, with their slopes by the spline through them. Cost: 40 ms a megapixel. */
export function plateFrom(level: Float32Array, widthPx: number, heightPx: number): Plate {
  const { slopeX, slopeY } = slopesOf(level, widthPx, heightPx);
  return {
    widthPx,
    heightPx,
    level,
    slopeX: Float32Array.from(slopeX),
    slopeY: Float32Array.from(slopeY),
  };
}

/** Ends included. */
interface Block {
  readonly fromX: number;
  readonly fromY: number;
  readonly toX: number;
  readonly toY: number;
}

type Luma = Uint8Array | Uint16Array;

/** A frame with its brightness relative to the others. */
interface Lit {
  readonly luma: Luma;
  readonly brightness: number;
}

/**
 * The most frames that show the same in a block, to within the noise: a body that leaves its place slowly still covers a part
 * of it in many frames, each time another.
 */
function agreeing(frames: readonly Lit[], block: Block, widthPx: number): Luma[] {
  const n = frames.length;
  const apart = new Float64Array(n * n);
  const all: number[] = [];
  for (let a = 0; a < n; a++) {
    for (let b = a + 1; b < n; b++) {
      const d = difference(frames[a], frames[b], block, widthPx);
      apart[a * n + b] = d;
      apart[b * n + a] = d;
      all.push(d);
    }
  }
  const likeNoise = all.sort((p, q) => p - q)[Math.floor(all.length / 10)];
  const like = (a: number, b: number) => apart[a * n + b] <= mostApart * likeNoise;
  let best: Lit[] = [];
  for (let a = 0; a < n; a++) {
    const set = frames.filter((_, b) => like(a, b));
    if (set.length > best.length) best = set;
  }
  return best.map((f) => f.luma);
}

/** Root mean square difference of two frames in a block. */
function difference(a: Lit, b: Lit, { fromX, fromY, toX, toY }: Block, widthPx: number): number {
  let squares = 0;
  for (let y = fromY; y <= toY; y++) {
    for (let x = fromX; x <= toX; x++)
      squares += (a.luma[y * widthPx + x] / a.brightness - b.luma[y * widthPx + x] / b.brightness) ** 2;
  }
  return Math.sqrt(squares / ((toX - fromX + 1) * (toY - fromY + 1)));
}

function middleMean(lumas: readonly (Uint8Array | Uint16Array)[], at: number, values: Float64Array): number {
  const n = lumas.length;
  for (let k = 0; k < n; k++) {
    const v = lumas[k][at];
    let j = k - 1;
    while (j >= 0 && values[j] > v) {
      values[j + 1] = values[j];
      j--;
    }
    values[j + 1] = v;
  }
  const from = n >> 2;
  const to = n - from;
  let sum = 0;
  for (let k = from; k < to; k++) sum += values[k];
  return sum / (to - from);
}

/** Zero-normalised cross-correlation of a frame with the frame that shows the body, over the inner part of its rest place. */
function likeness(picture: Picture, rest: RestPlace): number {
  const { widthPx, heightPx } = picture;
  const r = Math.max(2, Math.round(rest.radiusPx / 2));
  const [cx, cy] = [Math.round(rest.xPx), Math.round(rest.yPx)];
  let n = 0;
  let a = 0;
  let b = 0;
  let aa = 0;
  let bb = 0;
  let ab = 0;
  for (let y = Math.max(0, cy - r); y <= Math.min(heightPx - 1, cy + r); y++) {
    for (let x = Math.max(0, cx - r); x <= Math.min(widthPx - 1, cx + r); x++) {
      const u = picture.luma[y * widthPx + x];
      const v = rest.picture.luma[y * widthPx + x];
      n++;
      a += u;
      b += v;
      aa += u * u;
      bb += v * v;
      ab += u * v;
    }
  }
  const va = aa - (a * a) / n;
  const vb = bb - (b * b) / n;
  return va > 0 && vb > 0 ? (ab - (a * b) / n) / Math.sqrt(va * vb) : 0;
}

/**
 * Brightness of a frame relative to the plate (a lamp's flicker): ratio of sums over a coarse grid of pixels, after those that
 * a body or the tether covers have been left out.
 */
export function brightnessOf(picture: Picture, plate: Pick<Plate, 'level'>): number {
  const count = picture.luma.length;
  const stride = Math.max(1, Math.floor(count / 6000) | 1); // odd: walks through all columns
  let seen = 0;
  let still = 0;
  for (let i = 0; i < count; i += stride) {
    seen += picture.luma[i];
    still += plate.level[i];
  }
  const first = still > 0 ? seen / still : 1;
  const tolerance = 0.15;
  seen = 0;
  still = 0;
  for (let i = 0; i < count; i += stride) {
    const expected = first * plate.level[i];
    if (Math.abs(picture.luma[i] - expected) <= tolerance * expected + 1) {
      seen += picture.luma[i];
      still += plate.level[i];
    }
  }
  return still > 0 ? seen / still : first;
}
