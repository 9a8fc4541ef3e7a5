import { atRest } from './atRest.ts';
import { gravityParameter } from './gravityParameter.ts';
import type { Model } from './model.ts';

/** Free fall from rest in vacuum: y = -g τ²/2. */
export const freeFall: Model = {
  name: 'freeFall',
  title: 'free fall',
  expensive: false,
  specialCaseOf: [],
  concerns: () => true,
  refusal: () => null,
  parameters: ({ gravity }) => [gravityParameter(gravity)],
  fall(sinceReleaseS, { gMps2 }) {
    const fall = atRest(sinceReleaseS.length, Number.POSITIVE_INFINITY);
    sinceReleaseS.forEach((t, i) => {
      if (t <= 0) return;
      fall.yM[i] = -0.5 * gMps2 * t * t;
      fall.vyMps[i] = -gMps2 * t;
      fall.ayMps2[i] = -gMps2;
    });
    return fall;
  },
  slopes: (sinceReleaseS) => [sinceReleaseS.map((t) => (t > 0 ? -0.5 * t * t : 0))],
};
