import type { Curve, Piece, Smoothed } from '../../../analysis/motion/method.ts';

/** A pilot that knows the truth: what remains is what the prescribed method itself does. */
export function truthPilot(
  { timeS, uM }: Piece,
  yM: (t: number) => number,
  vMps: (t: number) => number,
  aMps2: (t: number) => number,
): Smoothed {
  const curve = (of: (t: number) => number): Curve => ({ value: timeS.map(of), u: uM.map((u) => 0.1 * u) });
  return {
    position: curve(yM),
    velocity: curve(vMps),
    acceleration: curve(aMps2),
    jerk: null,
    bandwidthHz: new Float64Array(timeS.length).fill(Number.NaN),
    settings: {},
  };
}

/** A piece at even times, its values with noise if there is a generator. */
export function pieceOf(
  n: number,
  stepS: number,
  yM: (t: number) => number,
  uM: number,
  gaussian: () => number = () => 0,
): Piece {
  const timeS = Float64Array.from({ length: n }, (_, i) => i * stepS);
  return {
    timeS,
    valueM: timeS.map((t) => yM(t) + uM * gaussian()),
    uM: new Float64Array(n).fill(uM),
    restUntil: null,
  };
}
