import { fallingChain } from '../../../fixtures/physics/beadChain.ts';
import { dormandPrince } from '../../../fixtures/physics/dormandPrince.ts';
import { fallingBall } from '../../../fixtures/physics/fallingBall.ts';

/** A motion from rest at time 0, known exactly; distance fallen is positive. */
export interface MotionTruth {
  readonly name: string;
  readonly kind: 'ball' | 'tip';
  /** Last instant of the record [s]. */
  readonly endS: number;
  /** Instant of the greatest acceleration within the record [s], if it is a peak. */
  readonly peakS: number | null;
  /** Half width at half peak [s]. */
  readonly halfWidthS: number;
  /** Link-by-link ripple that no smoother within its bandwidth shows: coverage is counted against the averaged truth. */
  readonly ripples: boolean;
  at(timeS: number): { readonly yM: number; readonly vMps: number; readonly aMps2: number };
}

const g = 9.81;
const lengthM = 1;
const air = { densityKgpm3: 1.2, viscosityPas: 1.82e-5 };

function ball(name: string, diameterM: number, massKg: number): MotionTruth {
  const endS = 0.38;
  const fall = fallingBall({ diameterM, massKg, gMps2: g, air, drag: 'sphere', buoyancy: true }, endS);
  return {
    name,
    kind: 'ball',
    endS,
    peakS: null,
    halfWidthS: Number.POSITIVE_INFINITY,
    ripples: false,
    at(timeS) {
      // Just after release: at the instant itself the body still rests.
      const { yM, vyMps, ayMps2 } = fall(Math.max(1e-9, timeS));
      return { yM: -yM, vMps: -vyMps, aMps2: -ayMps2 };
    },
  };
}

/** a = (g/2) (1 + 1/((1 - u)² + ε²)), u = fall / length; half width after shared limits, section F. */
function law(name: string, epsilon: number, pastPeak: boolean): MotionTruth {
  const down = (y: number) => (g / 2) * (1 + 1 / ((1 - y / lengthM) ** 2 + epsilon ** 2));
  const solved = dormandPrince(
    (_t, s, out) => {
      out[0] = s[1];
      out[1] = down(s[0]);
    },
    new Float64Array(2),
    0,
    0.45,
    1e-12,
    Float64Array.of(1, 1),
  );
  let [low, high] = [0, 0.45];
  while (high - low > 1e-12) {
    const middle = (low + high) / 2;
    if (solved.at(middle, 0) < lengthM) low = middle;
    else high = middle;
  }
  const halfWidthS = epsilon ** 1.5 * Math.sqrt((2 * lengthM) / (Math.PI * g));
  return {
    name,
    kind: 'tip',
    endS: pastPeak ? low + 4 * halfWidthS : low,
    peakS: pastPeak ? low : null,
    halfWidthS,
    ripples: false,
    at: (timeS) => {
      const yM = solved.at(timeS, 0);
      return { yM, vMps: solved.at(timeS, 1), aMps2: down(yM) };
    },
  };
}

/** A linked tether up to extension. */
function chain(
  name: string,
  links: number,
  tipMassKg: number,
  separationM: number,
  damping: number,
): MotionTruth {
  const fall = fallingChain(
    { lengthM, links, massKg: 0.1, tipMassKg, separationM, gMps2: g, jointDampingPerS: damping },
    0.47,
  );
  const start = fall.tip(0).yM;
  return {
    name,
    kind: 'tip',
    endS: Math.min(fall.farthestS, fall.lowestS),
    peakS: null,
    halfWidthS: 0.003,
    ripples: true,
    at(timeS) {
      const { yM, vyMps, ayMps2 } = fall.tip(Math.max(1e-9, timeS));
      return { yM: start - yM, vMps: -vyMps, aMps2: -ayMps2 };
    },
  };
}

export function motionTruths(): MotionTruth[] {
  return [
    ball('steel ball', 0.02, 0.0327),
    ball('wooden ball', 0.03, 0.0095),
    law('tip 50 g', 0.1, true),
    law('tip 150 g', 0.058, true),
    law('tip 50 g, cut at extension', 0.1, false),
    law('tip 150 g, cut at extension', 0.058, false),
    chain('60 links', 60, 0, 0.1, 0),
    chain('60 links, damped', 60, 0, 0.1, 100),
    chain('40 links, end weight', 40, 0.002, 0.2, 0),
  ];
}
