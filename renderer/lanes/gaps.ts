/**
 * Breaks a curve where frames are missing: a line drawn across would say what was not measured.
 *
 * @param timeS  increasing times [s]
 * @param of     values at these times
 * @returns points in order, with one without a value in the middle of each step longer than 1.5 times the usual one
 */
export function withGaps(
  timeS: readonly number[],
  of: readonly number[],
): { readonly x: number; readonly y: number }[] {
  const steps = timeS.slice(1).map((t, i) => t - (timeS[i] ?? t));
  const usual = [...steps].sort((a, b) => a - b)[steps.length >> 1] ?? 0;
  return timeS.flatMap((x, i) => {
    const point = { x, y: of[i] ?? Number.NaN };
    const before = steps[i - 1] ?? 0;
    return before > 1.5 * usual ? [{ x: x - before / 2, y: Number.NaN }, point] : [point];
  });
}
