// ln Γ by Lanczos' series, g = 7, n = 9 (Press et al., Numerical Recipes, 6.1); relative error below 1e-13.
const lanczos = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059, 12.507343278686905,
  -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
];

function logGamma(x: number): number {
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - logGamma(1 - x);
  const z = x - 1;
  let sum = lanczos[0];
  for (let i = 1; i < lanczos.length; i++) sum += lanczos[i] / (z + i);
  const t = z + 7.5;
  return 0.5 * Math.log(2 * Math.PI) + (z + 0.5) * Math.log(t) - t + Math.log(sum);
}

/** Regularised incomplete beta function I_x(a, b) by Lentz' continued fraction (Numerical Recipes, 6.4). */
function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const front = Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log(1 - x)) / a;
  const tiny = 1e-300;
  let c = 1;
  let d = 1 - ((a + b) * x) / (a + 1);
  d = 1 / (Math.abs(d) < tiny ? tiny : d);
  let f = d;
  for (let m = 1; m <= 500; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 + even * d;
    d = 1 / (Math.abs(d) < tiny ? tiny : d);
    c = 1 + even / c;
    f *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 + odd * d;
    d = 1 / (Math.abs(d) < tiny ? tiny : d);
    c = 1 + odd / c;
    const step = d * c;
    f *= step;
    if (Math.abs(step - 1) < 1e-15) break;
  }
  return front * f;
}

/**
 * Coverage factor of Student's t: ±k standard uncertainties hold the value with the stated probability.
 *
 * @param dof          degrees of freedom > 0; Infinity is the normal distribution
 * @param probability  two-sided, 0 … 1
 * JCGM 100:2008, G.3 and Table G.2.
 */
export function studentT(dof: number, probability: number): number {
  if (!(dof > 0) || !(probability > 0 && probability < 1)) throw new RangeError(`studentT: dof ${dof}, probability ${probability}`);
  const nu = Math.min(dof, 1e7); // beyond that t is the normal distribution to ten digits
  let low = 0;
  let high = 1;
  const outside = (t: number) => incompleteBeta(nu / (nu + t * t), nu / 2, 0.5);
  while (outside(high) > 1 - probability) high *= 2;
  for (let i = 0; i < 200 && high - low > 1e-13 * high; i++) {
    const middle = (low + high) / 2;
    if (outside(middle) > 1 - probability) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
