import { readFileSync } from 'node:fs';

export interface NistSet {
  readonly starts: readonly [Float64Array, Float64Array];
  readonly certified: readonly number[];
  readonly standardDeviations: readonly number[];
  readonly residualSumOfSquares: number;
  readonly x: readonly number[];
  readonly y: readonly number[];
}

/** One set of the NIST Statistical Reference Datasets for nonlinear regression, as its file has it. */
export function nistSet(name: string): NistSet {
  const text = readFileSync(
    new URL(`../../fixtures/published/nist-strd/${name}.dat`, import.meta.url),
    'utf8',
  );
  const lines = text.split(/\r?\n/);
  const parameters = lines.flatMap((line) => {
    const [, values] = /^\s*b\d+\s*=\s*(.*)$/.exec(line) ?? [];
    return values ? [values.trim().split(/\s+/).map(Number)] : [];
  });
  const [, sum] = /Residual Sum of Squares:\s*(\S+)/.exec(text) ?? [];
  const dataAt = lines.findLastIndex((line) => /^Data:\s+y\s+x/.test(line));
  const data = lines
    .slice(dataAt + 1)
    .map((line) => line.trim().split(/\s+/).map(Number))
    .filter((row) => row.length === 2 && row.every(Number.isFinite));
  return {
    starts: [Float64Array.from(parameters, (p) => p[0]), Float64Array.from(parameters, (p) => p[1])],
    certified: parameters.map((p) => p[2]),
    standardDeviations: parameters.map((p) => p[3]),
    residualSumOfSquares: Number(sum),
    x: data.map((row) => row[1]),
    y: data.map((row) => row[0]),
  };
}
