import type { Arithmetic } from './arithmetic.ts';
import type { InputQuantity, Measurement } from './measurement.ts';

/** A relative standard uncertainty that all lengths, or all times, share. */
interface CommonFactor {
  readonly source: string;
  readonly uRel: number;
}

export interface CommonFactors {
  readonly length: readonly CommonFactor[];
  readonly time: readonly CommonFactor[];
}

/** The factors as inputs of a measurement, each 1 with its uncertainty; named `length0`, `time0` … */
export function factorInputs(factors: CommonFactors): Record<string, InputQuantity> {
  const of = (kind: 'length' | 'time') =>
    factors[kind].map((f, i): [string, InputQuantity] => [
      `${kind}${i}`,
      { source: f.source, value: 1, u: f.uRel, unit: '1' },
    ]);
  return Object.fromEntries([...of('length'), ...of('time')]);
}

/** Product of the factors on lengths, or on times. */
export function factorOn<T>(
  kind: 'length' | 'time',
  factors: CommonFactors,
  m: Arithmetic<T>,
  x: Readonly<Record<string, T>>,
): T {
  return m.multiply(...factors[kind].map((_, i) => x[`${kind}${i}`]));
}

/**
 * A value that goes with powers of length and time (a speed: 1 and -1) and has sources of its own added to it, as a measurement:
 * y = value · (factors on length)^a · (factors on time)^b + own sources, each 0 with its uncertainty in the unit of the value.
 *
 * @param power  exponents a and b
 */
export function scaledMeasurement(
  value: number,
  power: { readonly length: number; readonly time: number },
  factors: CommonFactors,
  own: readonly Omit<InputQuantity, 'value'>[],
): Measurement<string, 'y'> {
  const ownInputs = Object.fromEntries(
    own.map((o, i): [string, InputQuantity] => [`own${i}`, { ...o, value: 0 }]),
  );
  const used: CommonFactors = {
    length: power.length === 0 ? [] : factors.length,
    time: power.time === 0 ? [] : factors.time,
  };
  return {
    inputs: { ...factorInputs(used), ...ownInputs },
    outputs: (m, x) => ({
      y: m.add(
        m.multiply(
          value,
          m.power(factorOn('length', used, m, x), power.length),
          m.power(factorOn('time', used, m, x), power.time),
        ),
        ...Object.keys(ownInputs).map((name) => x[name]),
      ),
    }),
  };
}
