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
/** So many frames that show the same in a block, and not the body that rested there, show the background. */
const leastAlike = 4;
/** Side of the blocks in which frames about a rest place are held against each other [px]. */
const blockPx = 8;
/** Frames differ by no more than this factor on what two frames of the same differ by: 64 pixels tell that to 9 %. */
const mostApart = 1.4;

/**
 * The still background: at each pixel the mean of the middle half of the sampled frames' grey levels, so that a body that
 * passes does not count. Around a rest place, block by block, only the frames count that show the same, and not the body.
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

  const lit = frames.map(({ picture }) => ({
    luma: picture.luma,
    brightness: brightnessOf(picture, { level }),
  }));
  for (const rest of rests) {
    const r = Math.ceil(rest.radiusPx);
    const [cx, cy] = [Math.round(rest.xPx), Math.round(rest.yPx)];
    const [toX, toY] = [Math.min(widthPx - 1, cx + r), Math.min(heightPx - 1, cy + r)];
    const atRest = { luma: rest.picture.luma, brightness: brightnessOf(rest.picture, { level }) };
    for (let y = Math.max(0, cy - r); y <= toY; y += blockPx) {
      for (let x = Math.max(0, cx - r); x <= toX; x += blockPx) {
        const block = {
          fromX: x,
          fromY: y,
          toX: Math.min(toX, x + blockPx - 1),
          toY: Math.min(toY, y + blockPx - 1),
        };
        const awayPx = Math.hypot((block.fromX + block.toX) / 2 - cx, (block.fromY + block.toY) / 2 - cy);
        const shown = awayPx <= r / 2 + blockPx / 2 ? atRest : null;
        const used = agreeing(lit, shown, block, widthPx);
        if (used.length < leastAlike) continue;
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
 *
 * @param atRest  a frame with a body at rest in the block: frames that show the same as it do not count if enough others do
 */
function agreeing(frames: readonly Lit[], atRest: Lit | null, block: Block, widthPx: number): Luma[] {
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
  const like = mostApart * all.sort((p, q) => p - q)[Math.floor(all.length / 10)];
  const most = (among: readonly number[]) => {
    let best: number[] = [];
    for (const a of among) {
      const set = among.filter((b) => apart[a * n + b] <= like);
      if (set.length > best.length) best = set;
    }
    return best;
  };
  const every = Array.from(frames.keys());
  const left = atRest && most(every.filter((a) => difference(frames[a], atRest, block, widthPx) > like));
  const set = left && left.length >= leastAlike ? left : most(every);
  return set.map((a) => frames[a].luma);
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
