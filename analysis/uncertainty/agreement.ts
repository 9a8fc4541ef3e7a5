import type { KeyValue } from '../sheet/result.ts';
import type { Measurement } from './measurement.ts';
import { type MonteCarloOptions, type MonteCarloResult, monteCarlo } from './monteCarlo.ts';
import { numericalTolerance } from './numericalTolerance.ts';
import { seededDraws } from './seededDraws.ts';

/** How well the law of propagation and the propagation of distributions agree. */
export interface Agreement {
  /** Differences of the two ends of the coverage interval. */
  readonly lowDiffers: number;
  readonly highDiffers: number;
  /** To so many significant digits of u both ends agree; 0: not even to one, so the Monte Carlo interval is the one to use. */
  readonly digits: 0 | 1 | 2;
}

/**
 * Validation of the law of propagation by Monte Carlo (JCGM 101:2008, 8.1.3): both ends of y ± U must be within the numerical
 * tolerance of u of the Monte Carlo interval's ends.
 *
 * @throws RangeError if u is not greater than 0
 */
export function agreementOf(
  { value, u, U95 }: Pick<KeyValue, 'value' | 'u' | 'U95'>,
  drawn: Pick<MonteCarloResult, 'low' | 'high'>,
): Agreement {
  const lowDiffers = Math.abs(value - U95 - drawn.low);
  const highDiffers = Math.abs(value + U95 - drawn.high);
  const worst = Math.max(lowDiffers, highDiffers);
  const to = ([2, 1] as const).find((digits) => worst <= numericalTolerance(u, digits));
  return { lowDiffers, highDiffers, digits: to ?? 0 };
}

/**
 * The key value with its Monte Carlo budget and the agreement of the two beside it.
 *
 * @param seed  kept in the result, so that the trials can be had again
 */
export function withMonteCarlo<Input extends string, Output extends string>(
  keyValue: KeyValue,
  measurement: Measurement<Input, Output>,
  output: Output,
  seed: number,
  options: Omit<MonteCarloOptions, 'coverage'> = {},
): KeyValue {
  const drawn = monteCarlo(measurement, output, seededDraws(seed), { ...options, coverage: 0.95 });
  const { mean, u, low, high, interval, trials, settled } = drawn;
  const { digits } = agreementOf(keyValue, drawn);
  return {
    ...keyValue,
    monteCarlo: {
      seed,
      trials,
      settled,
      mean,
      u,
      low95: low,
      high95: high,
      interval,
      agreesToDigits: digits,
    },
  };
}
