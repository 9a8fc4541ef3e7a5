import {
  type Layer,
  makeLayer,
  makeSampler,
  REACH,
  sampledFor,
  samplesOf,
  type WindowPoint,
} from './layer.ts';
import { coveredModel, spread } from './learnBody.ts';
import { type BodyModel, makeMatcher } from './match.ts';
import { roundMask } from './patchModel.ts';
import { quinticWeights, TAPS, TAPS_BEFORE } from './spline.ts';

/** How a body stands against its look at rest: turned clockwise as seen, and larger by the factor e^growth. */
export interface Pose {
  readonly turnRad: number;
  readonly growth: number;
}

export const asAtRest: Pose = { turnRad: 0, growth: 0 };

/** The look in a pose, turned about and growing from the centre, which stays where it is. */
export function posedModel(model: BodyModel, { turnRad, growth }: Pose, centre: WindowPoint): BodyModel {
  if (!model.coverage || (turnRad === 0 && growth === 0)) return model;
  const shrink = Math.exp(-growth);
  const [cos, sin] = [shrink * Math.cos(turnRad), shrink * Math.sin(turnRad)];
  const outer = model.half + REACH;
  const side = 2 * outer + 1;
  const appearance = new Float64Array(side * side);
  const coverage = new Float64Array(side * side);
  const wx = new Float64Array(TAPS);
  const wy = new Float64Array(TAPS);
  const unused = new Float64Array(TAPS);
  for (let row = 0; row < side; row++) {
    const dy = row - outer - centre.y;
    for (let column = 0; column < side; column++) {
      const dx = column - outer - centre.x;
      const x = outer + centre.x + cos * dx + sin * dy;
      const y = outer + centre.y - sin * dx + cos * dy;
      const fromX = Math.floor(x) - TAPS_BEFORE;
      const fromY = Math.floor(y) - TAPS_BEFORE;
      // Beyond the window nothing is known of the body.
      if (fromX < 0 || fromY < 0 || fromX + TAPS > side || fromY + TAPS > side) continue;
      quinticWeights(x - Math.floor(x), wx, unused);
      quinticWeights(y - Math.floor(y), wy, unused);
      const at = row * side + column;
      appearance[at] = valueAt(model.appearance, side, fromX, fromY, wx, wy);
      coverage[at] = valueAt(model.coverage, side, fromX, fromY, wx, wy);
    }
  }
  return coveredModel(model.half, appearance, coverage, model.spreadPx2);
}

function valueAt(
  { coefficients }: Layer,
  side: number,
  fromX: number,
  fromY: number,
  wx: Float64Array,
  wy: Float64Array,
): number {
  let value = 0;
  for (let j = 0; j < TAPS; j++) {
    let sum = 0;
    const at = (fromY + j) * side + fromX;
    for (let i = 0; i < TAPS; i++) sum += wx[i] * coefficients[at + i];
    value += wy[j] * sum;
  }
  return value;
}

/** Above this correlation with itself turned by half a turn a body is symmetric. */
const symmetric = 0.9;
/** Levels are scaled up by this for a picture of whole numbers. */
const fine = 64;

/**
 * The point about which a body is taken to turn. Of a marker that looks the same after half a turn (rings, quadrants, a bead) it
 * is the middle, wherever in it the mark was set; of any other body the point about which a small turn leaves the place that is
 * found alone.
 *
 * @param behind  mean level of the plate about the body [grey levels]
 */
export function centreOf(model: BodyModel, behind: number, noise: number): WindowPoint {
  return middleOfSymmetry(model, behind, noise) ?? unmixedCentre(model, behind);
}

/** Matches the look with itself turned by half a turn: the shift between them is twice the middle's place. */
function middleOfSymmetry(model: BodyModel, behind: number, noise: number): WindowPoint | null {
  const { half, coverage } = model;
  if (!coverage) return null;
  const side = 2 * (half + REACH) + 1;
  const alpha = samplesOf(coverage);
  const look = samplesOf(model.appearance).map((a, u) => fine * (a + (1 - alpha[u]) * behind));
  const picture = {
    widthPx: side,
    heightPx: side,
    bitDepth: 16,
    luma: Uint16Array.from(look, (v) => Math.min(65535, Math.max(0, Math.round(v)))),
  };
  const turned = makeLayer(look.slice().reverse(), half);
  const centre = half + REACH;
  const itself = { half, appearance: turned, coverage: null, spreadPx2: 0, mask: roundMask(half) };
  const m = makeMatcher(half).match(picture, itself, centre, centre, fine * noise, null, 1);
  if (!m?.converged || m.score < symmetric) return null;
  return { x: (m.xPx - centre) / 2, y: (m.yPx - centre) / 2 };
}

/** The point about which the equations of turn and place do not mix, over what is not thin. */
function unmixedCentre(model: BodyModel, behind: number): WindowPoint {
  const { half } = model;
  if (!model.coverage) return { x: 0, y: 0 };
  const side = 2 * half + 1;
  const a = sampledFor(half);
  const c = sampledFor(half);
  const sampler = makeSampler(half);
  sampler.sample(model.appearance, 0, 0, a);
  sampler.sample(model.coverage, 0, 0, c);
  const used = solidPart(c.value, side);
  let [xx, xy, yy, xt, yt] = [0, 0, 0, 0, 0];
  for (let u = 0; u < used.length; u++) {
    if (used[u] === 0) continue;
    const jx = a.slopeX[u] - behind * c.slopeX[u];
    const jy = a.slopeY[u] - behind * c.slopeY[u];
    const turn = jy * ((u % side) - half) - jx * (Math.floor(u / side) - half);
    xx += jx * jx;
    xy += jx * jy;
    yy += jy * jy;
    xt += jx * turn;
    yt += jy * turn;
  }
  // Zero of Σ jx·turn(centre) and Σ jy·turn(centre), with turn(centre) = turn - (jy·x - jx·y).
  const det = xx * yy - xy * xy;
  if (!(det > 1e-9 * xx * yy)) return { x: 0, y: 0 };
  return { x: (xx * yt - xy * xt) / det, y: (xy * yt - yy * xt) / det };
}

/** Parts thinner than about twice this many pixels (a tether that hangs on) do not count for a body's centre. */
const thinPx = 3;

/** What a body covers, with its rim, without its thin parts; all of it if there is nothing else. */
function solidPart(coverage: Float64Array, side: number): Uint8Array {
  const covered = Uint8Array.from(coverage, (a) => (a > 0.5 ? 1 : 0));
  let solid: Uint8Array = covered;
  for (let k = 0; k < thinPx; k++) solid = spread(solid, side, 0);
  // More than was taken off, so that the soft rim is in.
  for (let k = 0; k < thinPx + 2; k++) solid = spread(solid, side, 1);
  const count = (mask: Uint8Array) => mask.reduce((n, v) => n + v, 0);
  return count(solid) >= count(covered) / 2 ? solid : Uint8Array.from(coverage, (a) => (a > 0.01 ? 1 : 0));
}
