import { eventsOf } from '../../analysis/keyValues/events.ts';
import { type RecordSpec, syntheticRecord } from './syntheticRecord.ts';

/** How the values of one quantity lie about the truth over many records. */
export interface Coverage {
  /** Share of records whose value has the truth within its U95; a record without a value counts as missed. */
  readonly share: number;
  readonly given: number;
  readonly meanError: number;
  readonly greatestError: number;
  readonly meanU95: number;
}

/** A steel ball of 20 mm: drag takes 0.1 % of its acceleration. */
export const steelBall = { diameterM: 0.02, massKg: 0.0327 };

export const captureRatesHz = [240, 500, 1000, 5000];
export const noisesM = [10e-6, 50e-6, 200e-6];

/** Values against truth over records that differ in noise and in where within a frame release falls. */
export function coverageOf(spec: Omit<RecordSpec, 'seed'>, records: number): Record<string, Coverage> {
  const errors = new Map<string, { error: number; U95: number }[]>();
  for (let seed = 1; seed <= records; seed++) {
    const { input, truth } = syntheticRecord({ ...spec, seed });
    const { keyValues } = eventsOf(input);
    for (const [quantity, value] of Object.entries(truth)) {
      const list = errors.get(quantity) ?? [];
      errors.set(quantity, list);
      const found = keyValues.find((k) => k.quantity === quantity);
      if (found) list.push({ error: found.value - value, U95: found.U95 });
    }
  }
  return Object.fromEntries(
    Array.from(errors, ([quantity, list]) => {
      const mean = (of: (e: { error: number; U95: number }) => number) =>
        list.reduce((s, e) => s + of(e), 0) / list.length;
      return [
        quantity,
        {
          share: list.filter((e) => Math.abs(e.error) <= e.U95).length / records,
          given: list.length,
          meanError: mean((e) => e.error),
          greatestError: Math.max(...list.map((e) => Math.abs(e.error))),
          meanU95: mean((e) => e.U95),
        },
      ];
    }),
  );
}
