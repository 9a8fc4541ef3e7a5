import { logGamma } from './logGamma.ts';

/**
 * Two-sided coverage factor of Student's t distribution: the t for which P(|T| < t) = coverage.
 *
 * @param dof       degrees of freedom, greater than 0; null or infinite: the normal distribution
 * @param coverage  between 0 and 1
 * @throws RangeError if dof or coverage is out of range
 * JCGM 100:2008, Annex G, Table G.2. P(|T| < t) = 1 - I_x(ν/2, 1/2), x = ν/(ν + t²): Abramowitz & Stegun 26.7.1, 26.5.27.
 */
export function studentT(dof: number | null, coverage = 0.95): number {
  if (!(coverage > 0 && coverage < 1))
    throw new RangeError(`studentT: coverage ${coverage} is not in (0, 1)`);
  const nu = dof ?? Number.POSITIVE_INFINITY;
  if (!(nu > 0)) throw new RangeError(`studentT: ${dof} degrees of freedom`);
  // From 1e7 on t and normal agree to 1e-7; the continued fraction would need too many terms.
  const normal = nu > 1e7;
  const tail = (t: number) =>
    normal ? regularisedGammaTail(t) : incompleteBeta(nu / (nu + t * t), nu / 2, 0.5);
  const wanted = 1 - coverage;
  let low = 0;
  let high = 1;
  while (tail(high) > wanted) high *= 2;
  for (let i = 0; i < 200 && high - low > 1e-13 * high; i++) {
    const middle = (low + high) / 2;
    if (tail(middle) > wanted) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** P(|Z| > t) of the normal distribution = erfc(t/√2), as the tail of the gamma distribution with shape 1/2. */
function regularisedGammaTail(t: number): number {
  const x = (t * t) / 2;
  if (x < 1.5) {
    let term = 2;
    let sum = 2;
    for (let k = 1; k < 100 && term > 1e-17 * sum; k++) {
      term *= x / (k + 0.5);
      sum += term;
    }
    return 1 - sum * Math.sqrt(x / Math.PI) * Math.exp(-x);
  }
  // Lentz's continued fraction (Abramowitz & Stegun 6.5.31, a = 1/2)
  let b = x + 0.5;
  let c = 1e300;
  let d = 1 / b;
  let h = d;
  for (let i = 1; i < 500; i++) {
    const an = -i * (i - 0.5);
    b += 2;
    d = 1 / (an * d + b);
    c = b + an / c;
    h *= d * c;
    if (Math.abs(d * c - 1) < 1e-16) break;
  }
  return Math.exp(-x) * Math.sqrt(x / Math.PI) * h;
}

/** Regularised incomplete beta function I_x(a, b). */
function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  const front = Math.exp(a * Math.log(x) + b * Math.log1p(-x) - logBeta(a, b));
  // The fraction converges fast on this side of the mean; on the other the symmetry is used.
  return x < (a + 1) / (a + b + 2)
    ? (front * betaFraction(x, a, b)) / a
    : 1 - (front * betaFraction(1 - x, b, a)) / b;
}

/** Continued fraction of the incomplete beta function, Abramowitz & Stegun 26.5.8, by Lentz's method. */
function betaFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300;
  const away = (v: number) => (Math.abs(v) < tiny ? tiny : v);
  let c = 1;
  let d = 1 / away(1 - ((a + b) * x) / (a + 1));
  let h = d;
  for (let m = 1; m <= 20_000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / away(1 + even * d);
    c = away(1 + even / c);
    h *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / away(1 + odd * d);
    c = away(1 + odd / c);
    h *= d * c;
    if (Math.abs(d * c - 1) < 1e-15) return h;
  }
  throw new Error('studentT: the continued fraction did not converge');
}

function logBeta(a: number, b: number): number {
  return logGamma(a) + logGamma(b) - logGamma(a + b);
}
