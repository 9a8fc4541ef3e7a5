/** A load cell's record on its own clock; times strictly increase. */
export interface ForceRecord {
  readonly timeS: Float64Array;
  readonly forceN: Float64Array;
}

const leastRows = 16;

/**
 * A load cell's record from its text: a line of names, then time [s] and force [N] in the first two columns (RFC 4180 without quotes;
 * semicolon or tab as separator too).
 *
 * @returns the record, or what is wrong with which line, in words
 */
export function parseForceRecord(text: string): ForceRecord | { readonly problem: string } {
  const lines = text.replace(/^\uFEFF/, '').split(/\r?\n/);
  while (lines.at(-1)?.trim() === '') lines.pop();
  const separator = [';', '\t', ','].find((s) => lines[0]?.includes(s));
  if (separator === undefined)
    return { problem: 'line 1 has no two columns; give a line of names, then time in s and force in N' };
  const timeS: number[] = [];
  const forceN: number[] = [];
  for (let i = 0; i < lines.length; i++) {
    const cells = lines[i].split(separator).map((cell) => cell.trim());
    const [time, force] = [cells[0], cells[1] ?? ''].map((cell) => (cell === '' ? Number.NaN : Number(cell)));
    if (!Number.isFinite(time) || !Number.isFinite(force)) {
      if (i === 0) continue;
      return {
        problem: `line ${i + 1} is no time in s and force in N ("${lines[i].trim()}"); use a point for decimals`,
      };
    }
    const before = timeS.at(-1);
    if (before !== undefined && time <= before)
      return { problem: `line ${i + 1}: its time, ${time} s, is not after the one before, ${before} s` };
    timeS.push(time);
    forceN.push(force);
  }
  if (timeS.length < leastRows)
    return { problem: `it holds ${timeS.length} rows of time and force; at least ${leastRows} are needed` };
  return { timeS: Float64Array.from(timeS), forceN: Float64Array.from(forceN) };
}
