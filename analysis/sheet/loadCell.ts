import { z } from 'zod';

const finite = z.number().refine(Number.isFinite, 'must be a finite number');
const positive = finite.refine((v) => v > 0, 'must be greater than 0');
const notNegative = finite.refine((v) => v >= 0, 'must not be negative');

/** A load cell at the anchor, its record to be held against the tension worked out from the motion. */
export const loadCellSchema = z.object({
  /** CSV with a line of names, then time in s and force in N, pull positive; relative to the sheet. */
  path: z.string().min(1),
  /** As stated by the recorder; the times of the file are checked against it. */
  samplingRateHz: positive,
  /** Channel frequency class of the record (SAE J211-1, ISO 6487); 0: not filtered. */
  channelFrequencyClass: notNegative,
  /** Relative standard uncertainty of the force, from its certificate. */
  uForceRel: notNegative.optional(),
  /** How the two clocks are brought together. */
  synchronisation: z.discriminatedUnion('kind', [
    z.object({ kind: z.literal('crossCorrelation') }),
    /** Its largest pull is that of extension. */
    z.object({ kind: z.literal('peak') }),
    /** Both are on one clock but for a known offset, to be added to the record's times. */
    z.object({ kind: z.literal('offset'), offsetS: finite }),
  ]),
});

export type LoadCell = z.output<typeof loadCellSchema>;
