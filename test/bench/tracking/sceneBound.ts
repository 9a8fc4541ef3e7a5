import { LEVELS_16_PER_GREY } from '../../../fixtures/render/sensor.ts';
import type { DropScene } from '../../../fixtures/scene/dropScene.ts';
import type { DropSpec } from '../../../fixtures/scene/dropSpec.ts';
import { filmDrop } from '../../../fixtures/scene/filmDrop.ts';
import { type AxisVariances, meanBound, positionBound, stepPx } from './bound.ts';

/** Grey of the flat body that shows where it covers the picture. */
const flatGrey = 200;

/**
 * Cramér-Rao bound of a scene's body over the given frames, from noise-free renders with the body alone moved; what else is
 * in the picture (tether, other bodies, light) stays as it is and is taken as known.
 */
export function sceneBound(
  drop: DropScene,
  bodyId: 'tip' | 'ball',
  frames: readonly number[],
  patchPx: number,
): AxisVariances {
  const { spec, truth } = drop;
  const quiet: DropSpec = { ...spec, noiseSigma: 0, shotPerGrey: 0, bitDepth: 16 };
  const frameTimesS = Float64Array.from(frames, (n) => drop.frameTimesS[n]);
  const knocked = frames.findIndex((n) => n >= drop.knockFrame);
  const filmed = (shiftX: number, shiftY: number, changes: Partial<DropSpec> = {}): Float64Array[] => {
    // The rig is drawn around where the bodies start: there they must not be moved.
    const moved = (path: DropScene['tipAt']) => (timeS: number) => {
      const place = path(timeS);
      return timeS === 0 ? place : { x: place.x + shiftX, y: place.y + shiftY };
    };
    const pictures = filmDrop({
      ...drop,
      spec: { ...quiet, ...changes },
      frameTimesS,
      knockFrame: knocked < 0 ? Number.POSITIVE_INFINITY : knocked,
      ...(bodyId === 'tip' ? { tipAt: moved(drop.tipAt) } : { ballAt: moved(drop.ballAt) }),
    });
    return Array.from(pictures, ({ luma }) => Float64Array.from(luma, (v) => v / LEVELS_16_PER_GREY));
  };
  const flat = (grey: number): Partial<DropSpec> => {
    const greys = { light: grey, dark: grey };
    // A marker of one grey covers what a bead of its size covers.
    return bodyId === 'tip' ? { tipLook: 'bullseye', tipGreys: greys } : { ballGreys: greys };
  };
  const middle = filmed(0, 0);
  const right = filmed(stepPx, 0);
  const left = filmed(-stepPx, 0);
  const below = filmed(0, stepPx);
  const above = filmed(0, -stepPx);
  const black = filmed(0, 0, flat(0));
  const bright = filmed(0, 0, flat(flatGrey));
  const sigma = truth.pixelNoiseLevels / (spec.bitDepth === 16 ? LEVELS_16_PER_GREY : 1);
  return meanBound(
    frames.map((n, k) => {
      const seen = truth.frames[n][bodyId];
      return positionBound(
        {
          right: right[k],
          left: left[k],
          below: below[k],
          above: above[k],
          shine: middle[k].map((v, i) => v - black[k][i]),
          coverage: bright[k].map((v, i) => (v - black[k][i]) / flatGrey),
        },
        spec.widthPx,
        { xPx: seen.x, yPx: seen.y, diameterPx: patchPx },
        sigma,
      );
    }),
  );
}
