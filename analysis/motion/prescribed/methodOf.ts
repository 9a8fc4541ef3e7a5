import type { MotionSettings } from '../../sheet/motionSettings.ts';
import type { Curve, MotionMethod, Piece, Smoothed } from '../method.ts';
import { prescribedMethods } from './prescribed.ts';
import type { MethodWithSettings } from './prescribedMethod.ts';
import { smoothedBy } from './smoothedBy.ts';

/** The prescribed method that the sheet asks for; null when it asks for the adaptive one. */
export function prescribedBy(settings: MotionSettings): MethodWithSettings | null {
  return prescribedMethods.flatMap((m) => m.with(settings) ?? [])[0] ?? null;
}

/** The method that the sheet asks for, ready for any piece. */
export function methodOf(settings: MotionSettings | undefined, adaptive: MotionMethod): MotionMethod {
  const prescribed = settings ? prescribedBy(settings) : null;
  if (!prescribed) return adaptive;
  return {
    name: prescribed.description,
    smooth(piece) {
      const pilot = adaptive.smooth(piece);
      const smoother = prescribed.smoother(piece, pilot);
      return smoother ? smoothedBy(piece, smoother, pilot) : withoutValues(piece);
    },
  };
}

/** A piece with too few points for the method. */
function withoutValues({ timeS }: Piece): Smoothed {
  const none = (): Curve => ({ value: timeS.map(() => Number.NaN), u: timeS.map(() => Number.NaN) });
  return {
    position: none(),
    velocity: none(),
    acceleration: none(),
    jerk: null,
    bandwidthHz: timeS.map(() => Number.NaN),
    settings: { tooFewPoints: timeS.length },
  };
}
