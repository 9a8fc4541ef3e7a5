/** Whole numbers spread evenly from first to last, at most `count`. */
export function spreadOver(first: number, last: number, count: number): number[] {
  const steps = Math.min(count, last - first + 1);
  const all = Array.from({ length: steps }, (_, i) =>
    Math.round(first + ((i + 0.5) * (last - first + 1)) / steps - 0.5),
  );
  return [...new Set(all)];
}
