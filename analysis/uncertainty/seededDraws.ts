import type { RandomDraws } from './distribution.ts';

/**
 * Draws that are the same on every machine for the same seed, so that a Monte Carlo budget can be had again: sfc32
 * (C. Doty-Humphrey, PractRand) for bits, Marsaglia's polar method for normal draws.
 */
export function seededDraws(seed: number): RandomDraws {
  let a = 0x9e3779b9;
  let b = seed | 0;
  let c = Math.floor(seed / 4294967296) | 0;
  let counter = 1;
  function next(): number {
    const t = (((a + b) | 0) + counter) | 0;
    counter = (counter + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = (((c << 21) | (c >>> 11)) + t) | 0;
    return t >>> 0;
  }
  // mixes a small seed into all of the state
  for (let i = 0; i < 15; i++) next();
  // 53 bits: the tails of an interval are drawn from, so no step may show
  const uniform = () => ((next() >>> 5) * 67108864 + (next() >>> 6)) / 9007199254740992;
  let spare: number | null = null;
  return {
    uniform,
    gaussian() {
      if (spare !== null) {
        const kept = spare;
        spare = null;
        return kept;
      }
      for (;;) {
        const x = 2 * uniform() - 1;
        const y = 2 * uniform() - 1;
        const s = x * x + y * y;
        if (s >= 1 || s === 0) continue;
        const factor = Math.sqrt((-2 * Math.log(s)) / s);
        spare = y * factor;
        return x * factor;
      }
    },
  };
}
