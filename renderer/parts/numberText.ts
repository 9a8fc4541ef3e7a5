/** A pixel coordinate as shown: hundredths. */
export function pxText(valuePx: number): string {
  return valuePx.toFixed(2).replace('-', '\u2212');
}

/** A time on the clock [s], to the microsecond where that says something. */
export function timeText(timeS: number | null): string {
  if (timeS === null || !Number.isFinite(timeS)) return '–';
  return `${timeS
    .toFixed(6)
    .replace(/0{1,3}$/, '')
    .replace('-', '\u2212')} s`;
}

export function durationText(timeS: number): string {
  if (timeS < 90) return `${Math.max(1, Math.round(timeS))} s`;
  return `${Math.round(timeS / 60)} min`;
}
