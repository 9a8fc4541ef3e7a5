/** Steps may differ by so much of a step: a container's clock rounds to 1/90 000 s, 0.03 % of a step at 30 frames per second. */
const tolerance = 1e-3;

/** Whether steps are equal but for rounding. */
export function areEven(timeS: Float64Array): boolean {
  return unevenAt(timeS) === null;
}

/** Index of the first point whose step to the next differs from the median step; null when none does. */
export function unevenAt(timeS: Float64Array): number | null {
  const stepS = medianStepS(timeS);
  for (let i = 0; i + 1 < timeS.length; i++) {
    if (Math.abs(timeS[i + 1] - timeS[i] - stepS) > tolerance * stepS) return i;
  }
  return null;
}

export function medianStepS(timeS: Float64Array): number {
  const steps = Float64Array.from(
    { length: Math.max(0, timeS.length - 1) },
    (_, i) => timeS[i + 1] - timeS[i],
  );
  steps.sort();
  return steps[steps.length >> 1] ?? Number.NaN;
}
