import type { Piece, Smoothed } from './method.ts';

/** A piece too short for derivatives: positions as they were measured, and nothing else. */
export function tooShort({ timeS, valueM, uM }: Piece): Smoothed {
  const none = new Float64Array(timeS.length).fill(Number.NaN);
  return {
    position: { value: valueM, u: uM },
    velocity: { value: none, u: none },
    acceleration: { value: none, u: none },
    jerk: null,
    bandwidthHz: none,
    settings: { tooShort: true },
  };
}
