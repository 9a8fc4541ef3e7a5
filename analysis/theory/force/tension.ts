import type { Motion, Tension } from '../../sheet/result.ts';
import type { LocalGravity } from '../normalGravity.ts';

/** What the pull is worked out from beside the tip's motion: masses in kg, lengths in m, each with its standard uncertainty. */
export interface TensionInput {
  readonly motion: Pick<Motion, 'timeS' | 'yM' | 'vyMps' | 'ayMps2' | 'uYM' | 'uVyMps' | 'uAyMps2'>;
  readonly startYM: number;
  readonly releaseS: number;
  /** Extension, or the end of the fall that was seen [s]. */
  readonly untilS: number;
  readonly massKg: number;
  readonly uMassKg: number;
  readonly tipMassKg: number;
  readonly uTipMassKg: number;
  readonly lengthM: number;
  readonly uLengthM: number;
  readonly gravity: LocalGravity;
  /** Relative standard uncertainty of all measured lengths. */
  readonly uLengthRel: number;
}

/** Closer to extension than this share of the length there is hardly an arm left: a formula for a fold says nothing there. */
const lastShare = 0.98;

/**
 * Pull on the anchor, force in the fold and energy lost against time, from the tip's measured motion and the masses alone.
 *
 * No model of the fold is in it, only the balance of momentum of a folded tether whose ends hang side by side (Calkin & March,
 * Am. J. Phys. 57 (1989) 154, equations of motion for either form). With x fallen, v, a measured (down), A = M + m(1 - x/L)/2 the
 * mass that falls:
 *
 *   anchor  F = (m + M)g - d(A v)/dt = (m + M)g - A a + m v²/(2L)
 *   fold    T = A (a - g), the pull on the falling arm; m v²/(4L) where no energy is lost, 0 where all is
 *   lost    E = g(M x + m x/2 - m x²/(4L)) - A v²/2
 *
 * Uncertainties combine those of position, velocity, acceleration, masses, length, gravity and scale as independent of each other;
 * of the motion's own three only the acceleration matters much.
 */
export function tensionOf(input: TensionInput): Tension {
  const { motion, startYM, releaseS, untilS, lengthM, gravity } = input;
  const tension: Tension = {
    timeS: [],
    anchorN: [],
    uAnchorN: [],
    foldN: [],
    uFoldN: [],
    energyLostJ: [],
    uEnergyLostJ: [],
  };
  motion.timeS.forEach((timeS, i) => {
    const x = startYM - motion.yM[i];
    if (timeS <= releaseS || timeS >= untilS || x > lastShare * lengthM) return;
    const value = [
      x,
      -motion.vyMps[i],
      -motion.ayMps2[i],
      input.massKg,
      input.tipMassKg,
      lengthM,
      gravity.gMps2,
      1,
    ];
    const u = [
      motion.uYM[i],
      motion.uVyMps[i],
      motion.uAyMps2[i],
      input.uMassKg,
      input.uTipMassKg,
      input.uLengthM,
      gravity.uGMps2,
      input.uLengthRel,
    ];
    if (![...value, ...u].every(Number.isFinite)) return;
    const forces = forcesAt(value);
    const uForces = propagated(value, u);
    tension.timeS.push(timeS);
    tension.anchorN.push(forces[0]);
    tension.uAnchorN.push(uForces[0]);
    tension.foldN.push(forces[1]);
    tension.uFoldN.push(uForces[1]);
    tension.energyLostJ.push(forces[2]);
    tension.uEnergyLostJ.push(uForces[2]);
  });
  return tension;
}

type Forces = readonly [anchorN: number, foldN: number, lostJ: number];

/** The scale c multiplies what was measured in lengths: position, velocity and acceleration. */
function forcesAt([x0, v0, a0, m, tip, length, g, c]: readonly number[]): Forces {
  const [x, v, a] = [c * x0, c * v0, c * a0];
  const falling = tip + (m * (1 - x / length)) / 2;
  return [
    (m + tip) * g - falling * a + (m * v * v) / (2 * length),
    falling * (a - g),
    g * (tip * x + (m * x) / 2 - (m * x * x) / (4 * length)) - (falling * v * v) / 2,
  ];
}

/** The forces are at most cubic in each input, so a central difference over ± u is its slope to far better than u is known. */
function propagated(value: readonly number[], u: readonly number[]): Forces {
  const squares = [0, 0, 0];
  u.forEach((uk, k) => {
    const at = (shift: number) => forcesAt(value.map((v, j) => (j === k ? v + shift : v)));
    const [above, below] = [at(uk), at(-uk)];
    for (let f = 0; f < 3; f++) squares[f] += ((above[f] - below[f]) / 2) ** 2;
  });
  const [anchor, fold, lost] = squares.map(Math.sqrt);
  return [anchor, fold, lost];
}
