import { z } from 'zod';

/** How positions are to be turned into velocity and acceleration, and what is wanted of them. */

const finite = z.number().refine(Number.isFinite, 'must be a finite number');
const positive = finite.refine((v) => v > 0, 'must be greater than 0');

/** A stretch of time over which mean and largest acceleration are wanted. */
const interval = z
  .object({
    body: z.enum(['tip', 'ball']).default('tip'),
    /** Where the times count from: the body's release, the tip's extension, or zero of the frames' clock. */
    zero: z.enum(['release', 'extension', 'clock']).default('release'),
    fromS: finite,
    toS: finite,
  })
  .refine((i) => i.toS > i.fromS, 'toS must be after fromS');

const wanted = {
  intervals: z.array(interval).max(20).optional(),
  /** Heights in the world (y up, origin as stated) at which the speed of tip and ball is wanted. */
  heightsM: z.array(finite).max(20).optional(),
  /** Also the factor on u of a band that holds the whole acceleration curve at once with 95 % (`simultaneousFactor95` of the motion's settings). */
  simultaneousBands: z.boolean().optional(),
};

/** The default: bandwidth chosen at each instant from the data. */
const adaptive = z.object({ method: z.literal('adaptive'), ...wanted });

/** Polynomial of fixed degree in a fixed window of equal weights (Savitzky & Golay on even times). */
const localPolynomial = z
  .object({
    method: z.literal('localPolynomial'),
    degree: z.int().min(2).max(6).optional(),
    /** Whole width of the window, an odd number of frames; absent: chosen from the data. */
    windowFrames: z
      .int()
      .min(3)
      .refine((w) => w % 2 === 1, 'must be an odd number of frames')
      .optional(),
    ...wanted,
  })
  .refine(
    ({ degree, windowFrames }) => degree === undefined || windowFrames === undefined || windowFrames > degree,
    'windowFrames must be greater than degree',
  );

/** Smoothing spline of degree 5; its smoothness by generalised cross-validation. */
const quinticSpline = z.object({ method: z.literal('quinticSpline'), ...wanted });

/** Second-order Butterworth low-pass, run forward and backward. */
const butterworth = z.object({
  method: z.literal('butterworth'),
  /** Where both runs together are 3 dB down; absent: by residual analysis. */
  cutoffHz: positive.optional(),
  ...wanted,
});

/** Channel frequency class applied to the acceleration. */
const channelClass = z.object({
  method: z.literal('channelClass'),
  class: z.union([z.literal(60), z.literal(180), z.literal(600), z.literal(1000)], {
    error: 'must be 60, 180, 600 or 1000',
  }),
  /** The two standards differ by 0.3 % in the corner frequency. */
  standard: z.enum(['SAE J211-1', 'ISO 6487']).default('SAE J211-1'),
  ...wanted,
});

/** Differences of positions a stated number of frames apart to either side. */
const centralDifference = z.object({
  method: z.literal('centralDifference'),
  strideFrames: z.int().min(1).max(1000),
  ...wanted,
});

export const motionSettingsSchema = z.discriminatedUnion('method', [
  adaptive,
  localPolynomial,
  quinticSpline,
  butterworth,
  channelClass,
  centralDifference,
]);

/** The methods that can be prescribed, by their names in the sheet. */
export const motionMethods = motionSettingsSchema.options.map((o) => o.shape.method.value);

export type MotionSettings = z.output<typeof motionSettingsSchema>;
/** What a method's own file needs of the sheet. */
export type SettingsOf<M extends MotionSettings['method']> = Extract<MotionSettings, { method: M }>;
export type MotionInterval = z.output<typeof interval>;
