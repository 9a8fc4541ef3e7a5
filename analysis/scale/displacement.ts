import type { RelativeSource } from '../motion/worldTrack.ts';
import { plainNumbers } from '../uncertainty/arithmetic.ts';
import { leastSquares } from '../uncertainty/linearSystem.ts';

/** Positions of a body over the part of its way that a value comes from. */
export interface Way {
  readonly timeS: ArrayLike<number>;
  readonly xM: ArrayLike<number>;
  readonly yM: ArrayLike<number>;
}

const together = (parts: readonly number[]) => Math.hypot(...parts);

/**
 * What the sources of the scale make of an acceleration that is fitted along a way, relative to it: of an error that stretches
 * all lengths alike its own share, of one that does not (pitch, lens) what it does to the parabola.
 *
 * @throws RangeError with fewer than three places
 */
export function alongFall(sources: readonly RelativeSource[], way: Way): RelativeSource[] {
  const zeroS = way.timeS[0];
  const design = Array.from(way.timeS, (t) => [1, t - zeroS, (t - zeroS) ** 2]);
  const curvature = (values: readonly number[]) => leastSquares(plainNumbers, design, [...values])[2];
  const whole = curvature(Array.from(way.yM));
  return sources.map((source) =>
    source.moves === undefined
      ? source
      : {
          ...source,
          uRel: together(
            source.moves.map(
              (move) => curvature(Array.from(way.yM, (yM, i) => move({ xM: way.xM[i], yM }).yM - yM)) / whole,
            ),
          ),
        },
  );
}

/** Half the length over which the local stretch is taken [m]: the fields are smooth over a picture. */
const nearM = 0.005;

/** What the sources of the scale make of a small vertical length, or a speed, at a place, relative to it. */
export function atPlace(
  sources: readonly RelativeSource[],
  { xM, yM }: { readonly xM: number; readonly yM: number },
): RelativeSource[] {
  return sources.map((source) =>
    source.moves === undefined
      ? source
      : {
          ...source,
          uRel: together(
            source.moves.map(
              (move) => (move({ xM, yM: yM + nearM }).yM - move({ xM, yM: yM - nearM }).yM) / (2 * nearM) - 1,
            ),
          ),
        },
  );
}

/** What they make of the distance of two places, relative to it. */
export function betweenPlaces(
  sources: readonly RelativeSource[],
  a: { readonly xM: number; readonly yM: number },
  b: { readonly xM: number; readonly yM: number },
): RelativeSource[] {
  const length = Math.hypot(b.xM - a.xM, b.yM - a.yM);
  return sources.map((source) => {
    if (source.moves === undefined) return source;
    const stretch = source.moves.map((move) => {
      const [p, q] = [move(a), move(b)];
      return Math.hypot(q.xM - p.xM, q.yM - p.yM) / length - 1;
    });
    return { ...source, uRel: together(stretch) };
  });
}
