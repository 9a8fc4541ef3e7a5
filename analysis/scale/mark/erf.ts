/** Error function, to 1.5e-7 (Abramowitz & Stegun, Handbook of Mathematical Functions, 7.1.26): far below a grey level of a picture. */
export function erf(x: number): number {
  const t = 1 / (1 + 0.3275911 * Math.abs(x));
  const polynomial =
    ((((1.061405429 * t - 1.453152027) * t + 1.421413741) * t - 0.284496736) * t + 0.254829592) * t;
  const value = 1 - polynomial * Math.exp(-x * x);
  return x < 0 ? -value : value;
}

/** Derivative of the error function. */
export function erfSlope(x: number): number {
  return (2 / Math.sqrt(Math.PI)) * Math.exp(-x * x);
}
