import { logGamma } from '../uncertainty/logGamma.ts';

/**
 * Probability that a chi-squared variable of so many degrees of freedom is larger: Q(dof/2, x/2), the upper incomplete gamma
 * function, by its series below x = a + 1 and Lentz's continued fraction above (Numerical Recipes, 6.2; Abramowitz & Stegun 26.4).
 */
export function chiSquaredTail(chiSquared: number, dof: number): number {
  if (dof <= 0) throw new RangeError(`chiSquaredTail: degrees of freedom must be positive, not ${dof}`);
  if (chiSquared <= 0) return 1;
  const a = dof / 2;
  const x = chiSquared / 2;
  const front = Math.exp(-x + a * Math.log(x) - logGamma(a));
  if (x < a + 1) {
    let term = 1 / a;
    let sum = term;
    for (let n = 1; n < 10_000 && term > sum * 1e-16; n++) {
      term *= x / (a + n);
      sum += term;
    }
    return 1 - front * sum;
  }
  let b = x + 1 - a;
  let c = 1e300;
  let d = 1 / b;
  let h = d;
  for (let n = 1; n < 10_000; n++) {
    const an = -n * (n - a);
    b += 2;
    d = 1 / (an * d + b);
    c = b + an / c;
    const factor = d * c;
    h *= factor;
    if (Math.abs(factor - 1) < 1e-15) break;
  }
  return front * h;
}
