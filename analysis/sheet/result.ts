import { z } from 'zod';
import { distributions } from '../uncertainty/distribution.ts';
import { modelNameSchema } from './theorySettings.ts';

/** What the program answers: one result for one sheet. Units are in the names (SI); `u…` is a standard uncertainty. */

const numbers = z.array(z.number());

const findingSchema = z.object({
  level: z.enum(['note', 'caution', 'stop']),
  code: z.string(),
  text: z.string(),
});

const bodyStateSchema = z.enum(['measured', 'bridged', 'lost', 'manual']);

/** Where a body is in a frame. A lost body has no position: x, y, ux, uy are absent. */
const bodyInFrame = z.object({
  x: z.number().optional(),
  y: z.number().optional(),
  ux: z.number().optional(),
  uy: z.number().optional(),
  score: z.number().optional(),
  state: bodyStateSchema,
  /** Mid-exposure time of the sensor row where this body is; absent with a global shutter. */
  timeS: z.number().optional(),
});

const frame = z.object({
  n: z.int(),
  /** Mid-exposure time of the row where the tip is (without a tip: the first body). Zero is mid-exposure of row 0 of frame 0. */
  timeS: z.number(),
  bodies: z.record(z.string(), bodyInFrame),
});

const motion = z.object({
  timeS: numbers,
  xM: numbers,
  yM: numbers,
  vxMps: numbers,
  vyMps: numbers,
  axMps2: numbers,
  ayMps2: numbers,
  uXM: numbers,
  uYM: numbers,
  uVxMps: numbers,
  uVyMps: numbers,
  uAxMps2: numbers,
  uAyMps2: numbers,
  /** Measured positions (not smoothed), same times. */
  measuredXM: numbers,
  measuredYM: numbers,
  method: z.string(),
  settings: z.record(z.string(), z.unknown()),
});

/** One source of a key value's uncertainty (JCGM 100:2008): its contribution, and what that is made of where it is known. */
const budgetRow = z.object({
  source: z.string(),
  /** Contribution to the standard uncertainty, in the unit of the key value. */
  u: z.number(),
  /** Degrees of freedom; absent: unlimited. */
  dof: z.number().optional(),
  distribution: z.enum(distributions).optional(),
  /** Estimate of the input, its standard uncertainty and their unit. */
  inputValue: z.number().optional(),
  uInput: z.number().optional(),
  inputUnit: z.string().optional(),
  /** Change of the key value for a change of the input by one of its units. */
  sensitivity: z.number().optional(),
});

/** The same budget by propagation of distributions (JCGM 101:2008). */
const monteCarlo = z.object({
  seed: z.int(),
  trials: z.int(),
  /** Whether the figures came to rest within the numerical tolerance. */
  settled: z.boolean(),
  mean: z.number(),
  u: z.number(),
  low95: z.number(),
  high95: z.number(),
  interval: z.enum(['symmetric', 'shortest']),
  /** Significant digits of u to which value ± U95 agrees with the interval (clause 8); 0: use the interval. */
  agreesToDigits: z.int().min(0).max(2),
});

const keyValue = z.object({
  quantity: z.string(),
  value: z.number(),
  u: z.number(),
  unit: z.string(),
  /** Effective degrees of freedom; null when unlimited. */
  dof: z.number().nullable(),
  U95: z.number(),
  k: z.number(),
  /** For values that belong to a bandwidth. */
  bandwidthHz: z.number().optional(),
  /** The footage ends, or is cut by extension, before the quantity has passed its peak: the true value may be greater. */
  atLeast: z.boolean().optional(),
  /** Frames in half the width of the peak at half its height; below 3 the frame rate limits the value, below 2 none is given. */
  framesInHalfWidth: z.number().optional(),
  /** How the value is defined, where the name alone leaves a choice. */
  definition: z.string().optional(),
  budget: z.array(budgetRow),
  /** Inputs of the budget that are correlated, by their sources. */
  correlations: z.array(z.object({ between: z.array(z.string()).length(2), r: z.number() })).optional(),
  monteCarlo: monteCarlo.optional(),
});

const theory = z.object({
  model: modelNameSchema,
  /** The body whose track the curve is held against. */
  body: z.string(),
  /** After the fit; release (releaseS), height before it (startYM) and the factors of the scales are among them. */
  parameters: z.record(z.string(), z.number()),
  /** Standard uncertainties, what the sheet states taken into account; 0: held. A parameter that nothing settles has none. */
  uParameters: z.record(z.string(), z.number()),
  chiSquared: z.number(),
  dof: z.number(),
  curve: z.object({ timeS: numbers, yM: numbers, vyMps: numbers, ayMps2: numbers }),
  /** What the model says the tether pulls with at the curve's times: on the anchor and on the falling arm [N]. */
  forces: z.object({ anchorN: numbers, foldN: numbers }).optional(),
  /** Akaike's information criterion with the correction for few points: the smaller the better, 10 more is decisive. */
  aicc: z.number().optional(),
  /** What settles a parameter: the footage, the sheet, both, nothing; or it was held. */
  settledBy: z.record(z.string(), z.enum(['held', 'footage', 'both', 'sheet', 'nothing'])).optional(),
  /** Correlation of the free parameters, in the order of `names`. */
  correlation: z.object({ names: z.array(z.string()), r: z.array(numbers) }).optional(),
  /** Measured height less the model's, at the frames that were fitted; `standardised` is divided by the uncertainty. */
  residuals: z.object({ timeS: numbers, yM: numbers, standardised: numbers }).optional(),
  /** Smallest chi-squared with one parameter held at each value, and the interval that covers 95 % (an end beyond bounds: null). */
  profiles: z
    .array(
      z.object({
        parameter: z.string(),
        values: numbers,
        chiSquared: numbers,
        from: z.number().nullable(),
        to: z.number().nullable(),
      }),
    )
    .optional(),
});

/** What the tether pulls with, from the tip's motion and the masses; uncertainties are standard ones. */
const tension = z.object({
  timeS: numbers,
  /** Pull on the anchor, and pull of the fold on the falling arm [N]. */
  anchorN: numbers,
  uAnchorN: numbers,
  foldN: numbers,
  uFoldN: numbers,
  /** Energy that the fall has set free and the motion does not have [J]. */
  energyLostJ: numbers,
  uEnergyLostJ: numbers,
});

/** A load cell's record on the footage's clock, held against the pull on the anchor. */
const loadCellResult = z.object({
  /** To be added to the record's times [s]. */
  offsetS: z.number(),
  uOffsetS: z.number(),
  correlation: z.number(),
  samplingRateHz: z.number(),
  channelFrequencyClass: z.number(),
  timeS: numbers,
  forceN: numbers,
  rmsDifferenceN: z.number(),
  /** Root mean square of the differences, each divided by its standard uncertainty. */
  rmsStandardised: z.number(),
});

const verdict = z.object({
  quantity: z.string(),
  outcome: z.enum(['pass', 'fail', 'undecided']),
  rule: z.enum(['guarded', 'simple']),
  /** Distance of the value from the nearest limit; negative when outside. */
  margin: z.number().nullable(),
  unit: z.string(),
});

export const resultSchema = z.object({
  schema: z.literal('tetherfall/result/1'),
  program: z.object({ name: z.literal('tetherfall'), version: z.string(), commit: z.string() }),
  inputs: z.object({
    sheetSha256: z.string(),
    footageSha256: z.string(),
    footage: z.object({
      widthPx: z.int(),
      heightPx: z.int(),
      bitDepth: z.int(),
      frameCount: z.int(),
      codec: z.string(),
      pixelFormat: z.string(),
      lumaRule: z.string(),
      decoder: z.string(),
    }),
  }),
  frames: z.array(frame),
  motion: z.record(z.string(), motion),
  keyValues: z.array(keyValue),
  theory: z.array(theory),
  /** Absent without a tether whose mass is stated. */
  tension: tension.optional(),
  loadCell: loadCellResult.optional(),
  verdicts: z.array(verdict),
  findings: z.array(findingSchema),
});

export type Result = z.output<typeof resultSchema>;
export type Finding = z.output<typeof findingSchema>;
export type BodyState = z.output<typeof bodyStateSchema>;
export type ResultFrame = Result['frames'][number];
export type BodyInFrame = z.output<typeof bodyInFrame>;
export type Motion = z.output<typeof motion>;
export type KeyValue = z.output<typeof keyValue>;
export type Theory = z.output<typeof theory>;
export type Tension = z.output<typeof tension>;
export type LoadCellResult = z.output<typeof loadCellResult>;
export type Verdict = z.output<typeof verdict>;
