import { studentT } from './studentT.ts';

/**
 * What is believed of an input quantity (JCGM 101:2008, 6.4):
 * `normal`; `rectangular`, `triangular` and `arcsine` between limits; `curvilinearTrapezoid`: rectangular between limits that are
 * themselves only known within a part of their distance; `studentT`: scaled by u, from a few readings.
 */
export const distributions = [
  'normal',
  'rectangular',
  'triangular',
  'arcsine',
  'curvilinearTrapezoid',
  'studentT',
] as const;
export type Distribution = (typeof distributions)[number];

/** Draws; seeded by whoever passes it in, so that a budget can be drawn again. */
export interface RandomDraws {
  /** 0 ≤ value < 1. */
  uniform(): number;
  /** Standard normal. */
  gaussian(): number;
}

/** Standard uncertainty of a quantity that lies within ± half of its value (JCGM 100:2008, 4.3.7 and 4.3.9; JCGM 101, 6.4.6). */
export function uOfHalfWidth(halfWidth: number, shape: 'rectangular' | 'triangular' | 'arcsine'): number {
  if (!(halfWidth >= 0)) throw new RangeError(`uOfHalfWidth: half-width ${halfWidth}`);
  return halfWidth / Math.sqrt({ rectangular: 3, triangular: 6, arcsine: 2 }[shape]);
}

/** Standard uncertainty from a certificate that gives an expanded one with its coverage factor (JCGM 100:2008, 4.3.3). */
export function uOfExpanded(expanded: number, coverageFactor: number): number {
  if (!(expanded >= 0 && coverageFactor > 0)) {
    throw new RangeError(`uOfExpanded: ${expanded} with coverage factor ${coverageFactor}`);
  }
  return expanded / coverageFactor;
}

/** Standard uncertainty from a coverage interval ± half at a level, with the degrees of freedom stated (JCGM 100:2008, 4.3.4). */
export function uOfInterval(half: number, coverage: number, dof: number | null = null): number {
  return uOfExpanded(half, studentT(dof, coverage));
}

/**
 * Degrees of freedom of an uncertainty that is itself only known to a share of its size: ν ≈ ½ (Δu/u)⁻² (JCGM 100:2008, G.4.2,
 * equation G.3).
 */
export function dofOfReliability(relative: number): number {
  if (!(relative > 0)) throw new RangeError(`dofOfReliability: ${relative}`);
  return 0.5 / relative ** 2;
}

/**
 * One draw from a distribution of mean 0 and standard uncertainty 1 (`studentT`: scale 1, so that its standard deviation is
 * √(ν/(ν - 2)) where it has one; JCGM 101:2008, 6.4.9).
 *
 * @param dof        of a Student t
 * @param limitsRel  of a curvilinear trapezoid: how far each limit may be off, as a share of the half-width, from 0 to 1
 * @throws RangeError if a Student t has no degrees of freedom
 */
export function drawStandard(
  distribution: Distribution,
  draws: RandomDraws,
  dof: number | null,
  limitsRel = 0,
): number {
  switch (distribution) {
    case 'normal':
      return draws.gaussian();
    case 'rectangular':
      return Math.sqrt(3) * (2 * draws.uniform() - 1);
    case 'triangular':
      return Math.sqrt(6) * (draws.uniform() + draws.uniform() - 1);
    case 'arcsine':
      return Math.SQRT2 * Math.sin(2 * Math.PI * draws.uniform());
    case 'curvilinearTrapezoid': {
      // JCGM 101:2008, 6.4.3: limits drawn within ± d about the half-width w; variance w²/3 + d²/9.
      const halfWidth = 1 + limitsRel * (2 * draws.uniform() - 1);
      return (halfWidth * (2 * draws.uniform() - 1)) / Math.sqrt(1 / 3 + limitsRel ** 2 / 9);
    }
    case 'studentT':
      if (dof === null) throw new RangeError('drawStandard: a Student t without degrees of freedom');
      return draws.gaussian() / Math.sqrt(drawChiSquared(dof, draws) / dof);
  }
}

/** A draw of chi-squared with ν degrees of freedom: G. Marsaglia & W. W. Tsang, ACM Trans. Math. Softw. 26 (2000) 363. */
export function drawChiSquared(dof: number, draws: RandomDraws): number {
  const shape = dof / 2;
  // For a shape below 1: gamma(a) = gamma(a + 1) U^(1/a).
  const boost = shape < 1 ? (1 - draws.uniform()) ** (1 / shape) : 1;
  const d = (shape < 1 ? shape + 1 : shape) - 1 / 3;
  const c = 1 / Math.sqrt(9 * d);
  for (;;) {
    const x = draws.gaussian();
    const v = (1 + c * x) ** 3;
    if (v <= 0) continue;
    if (Math.log(1 - draws.uniform()) < 0.5 * x * x + d - d * v + d * Math.log(v)) return 2 * boost * d * v;
  }
}
