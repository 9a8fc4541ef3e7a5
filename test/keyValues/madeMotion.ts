import type { BodyMotion } from '../../analysis/motion/bodyMotion.ts';
import type { Common } from '../../analysis/motion/worldTrack.ts';

/** Motion straight down with a known fall, as a perfect method would give it: y = -drop. */
export function madeMotion(
  rateHz: number,
  untilS: number,
  fall: (timeS: number) => { dropM: number; speedMps: number; accelerationMps2: number },
  u = { yM: 1e-5, vMps: 1e-3, aMps2: 0.1 },
  bandwidthHz = rateHz / 4,
): BodyMotion {
  const timeS = Array.from({ length: Math.floor(untilS * rateHz) + 1 }, (_, i) => i / rateHz);
  const falls = timeS.map(fall);
  const all = (value: number) => timeS.map(() => value);
  const yM = falls.map((f) => -f.dropM);
  return {
    motion: {
      timeS,
      yM,
      xM: all(0),
      vxMps: all(0),
      axMps2: all(0),
      vyMps: falls.map((f) => -f.speedMps),
      ayMps2: falls.map((f) => -f.accelerationMps2),
      uXM: all(u.yM),
      uYM: all(u.yM),
      uVxMps: all(u.vMps),
      uVyMps: all(u.vMps),
      uAxMps2: all(u.aMps2),
      uAyMps2: all(u.aMps2),
      measuredXM: all(0),
      measuredYM: yM,
      method: 'made',
      settings: {},
    },
    bandwidthHz: Float64Array.from(all(bandwidthHz)),
    jerkY: { value: Float64Array.from(all(Number.NaN)), u: Float64Array.from(all(Number.NaN)) },
  };
}

export function commonAt(rateHz: number): Common {
  return {
    length: [{ source: 'scale bar length', uRel: 1e-3 }],
    time: [],
    uDownRad: 0,
    frameTimeS: 1 / rateHz,
    exposureS: 0,
    metrePerPx: 0.001,
  };
}
