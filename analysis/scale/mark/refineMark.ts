import type { Picture } from '../../track/track.ts';
import { type FittedTarget, fitTarget } from './fitTarget.ts';
import { type TargetKind, type TargetShape, targetShapes } from './shapes.ts';
import { pixelNoise, type Window, windowAt } from './window.ts';

export interface RefinedMark {
  readonly ok: true;
  readonly kind: TargetKind;
  readonly x: number;
  readonly y: number;
  /** Standard uncertainties from the picture's noise and from what the model leaves. An edge has one across itself only. */
  readonly uXPx: number;
  readonly uYPx: number;
  /** For an edge: direction of its normal [rad], along which alone it was refined. */
  readonly acrossRad?: number;
  /** Radius of the window that was used [px]. */
  readonly halfPx: number;
  /** Size of the target where it has one: radius of a disc, width of a cross's arms [px]. */
  readonly sizePx?: number;
}

export interface NotRefined {
  readonly ok: false;
  /** In words. */
  readonly reason: string;
}

const halves = [4, 6, 9, 13, 18, 25];
/** A place set by hand is within so many pixels of its target. */
const usualReachPx = 6;
/** The target must explain most of what varies in the window, shading apart; noise alone gives a fit of ten numbers far less. */
const leastExplained = 0.8;
/** Contrast below this many times the noise is nothing to hold on to. */
const leastContrast = 4;
/** What the model may leave beyond noise, as a share of the contrast. */
const modelShare = 0.03;
/** What is left at a true target without noise (pixel areas, rounding): see test/scale/refineMark.test.ts [px]. */
const uModelPx = 0.002;

/**
 * The centre of a target near a place that was set by hand, to a hundredth of a pixel: the shape of a quadrant, cross, disc or
 * edge, blurred as the picture is, is fitted to the pixels. Windows of several sizes and, with 'auto', all shapes are tried; the
 * window with the smallest uncertainty among those that the model describes down to the noise is taken.
 *
 * @param place    in pixels, integer at pixel centres
 * @param kind     'auto': whichever shape describes the pixels best
 * @param reachPx  how far from the place its centre may be
 */
export function refineMark(
  picture: Picture,
  place: { readonly x: number; readonly y: number },
  kind: TargetKind | 'auto' = 'auto',
  reachPx: number = usualReachPx,
): RefinedMark | NotRefined {
  const shapes = targetShapes.filter((shape) => kind === 'auto' || shape.kind === kind);
  const noise = pixelNoise(picture, place.x, place.y, 25);
  const clean = ({ contrast, explained, residual }: FittedTarget): 'no' | 'there' | 'clean' => {
    if (Math.abs(contrast) < leastContrast * noise || explained < leastExplained) return 'no';
    return residual > 1.3 * noise + modelShare * Math.abs(contrast) ? 'there' : 'clean';
  };
  let best: Found | null = null;
  let seen = false;
  for (const half of halves) {
    const held: Found | null = best && best.shape.kind !== 'edge' ? best : null;
    const found: Found | null = held
      ? inWindow(held, picture, half)
      : search(shapes, picture, place, half, reachPx);
    const state = found ? clean(found.fitted) : 'no';
    if (state !== 'no') seen = true;
    // Once a target is found, a window that takes in what is not of it is the last.
    if (held && state !== 'clean') break;
    if (!found || state !== 'clean') continue;
    // Taking the smallest of uncertainties that differ by chance alone would make it too small.
    if (!best || best.shape.kind === 'edge' || uOf(found) < worthwhile * uOf(best)) best = found;
  }
  if (best) return markOf(best, place);
  const what = kind === 'auto' ? 'quadrant, cross, disc or edge' : kind;
  return {
    ok: false,
    reason: seen
      ? `what is there is no clean ${what}`
      : `no ${what} is to be seen within ${reachPx} px of it`,
  };
}

/** A target as it was fitted in a window. */
interface Found {
  readonly shape: TargetShape;
  readonly fitted: FittedTarget;
  readonly window: Window;
}

/** A larger window is taken if its variance is by so much smaller. */
const worthwhile = 0.8;

const uOf = ({ fitted }: Found) => Math.hypot(fitted.covariance.xx, fitted.covariance.yy);

/** A target that was found, in a window of another size about its centre. */
function inWindow({ shape, fitted, window }: Found, picture: Picture, half: number): Found | null {
  const [x, y] = [window.centreX + fitted.x, window.centreY + fitted.y];
  const other = windowAt(picture, x, y, half);
  if (!other) return null;
  const known = { ...fitted, x: x - other.centreX, y: y - other.centreY };
  const again = fitTarget(shape, other, 1.5, known);
  return again && { shape, fitted: again, window: other };
}

/** The shape that describes the pixels about a place best, fitted again in a window about its own centre. */
function search(
  shapes: readonly TargetShape[],
  picture: Picture,
  place: { readonly x: number; readonly y: number },
  half: number,
  reachPx: number,
): Found | null {
  const window = windowAt(picture, place.x, place.y, half);
  if (!window) return null;
  let best: Found | null = null;
  for (const shape of shapes) {
    const fitted = fitTarget(shape, window, reachPx);
    if (fitted && (!best || fitted.aicc < best.fitted.aicc)) best = { shape, fitted, window };
  }
  return best && Math.hypot(best.fitted.x, best.fitted.y) >= 1 ? inWindow(best, picture, half) : best;
}

function markOf(
  { shape, fitted, window }: Found,
  place: { readonly x: number; readonly y: number },
): RefinedMark {
  const { xx, yy } = fitted.covariance;
  const at = { x: window.centreX + fitted.x, y: window.centreY + fitted.y };
  const base = { ok: true, kind: shape.kind, halfPx: window.halfPx } as const;
  if (shape.kind === 'edge') {
    // One coordinate was held: the foot of the place on the edge, and the uncertainty across it.
    const normal = fitted.own[0];
    const [c, s] = [Math.cos(normal), Math.sin(normal)];
    const across = (at.x - place.x) * c + (at.y - place.y) * s;
    const u = Math.hypot(Math.sqrt(xx) * c, Math.sqrt(yy) * s, uModelPx);
    return {
      ...base,
      x: place.x + across * c,
      y: place.y + across * s,
      uXPx: u * Math.abs(c),
      uYPx: u * Math.abs(s),
      acrossRad: normal,
    };
  }
  return {
    ...base,
    ...at,
    uXPx: Math.hypot(Math.sqrt(xx), uModelPx),
    uYPx: Math.hypot(Math.sqrt(yy), uModelPx),
    ...(shape.kind === 'disc'
      ? { sizePx: fitted.own[0] }
      : shape.kind === 'cross'
        ? { sizePx: fitted.own[2] }
        : {}),
  };
}
