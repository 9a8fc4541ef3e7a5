import { z } from 'zod';

/** What is asked of the planner. Units are in the names (SI); `u…` is a standard uncertainty. */

const finite = z.number().refine(Number.isFinite, 'must be a finite number');
const positive = finite.refine((v) => v > 0, 'must be greater than 0');
const notNegative = finite.refine((v) => v >= 0, 'must not be negative');

/** Quantities that can be planned for, with their units. */
export const plannedQuantities = {
  'ball.g': 'm/s2',
  'tip.peakSpeed': 'm/s',
  'tip.peakAcceleration': 'm/s2',
  'tip.extensionTime': 's',
} as const;
export type PlannedQuantity = keyof typeof plannedQuantities;

const wanted = z
  .strictObject({
    quantity: z.enum(Object.keys(plannedQuantities) as [PlannedQuantity, ...PlannedQuantity[]]),
    /** Standard uncertainty wanted, in the unit of the quantity, or as a share of its expected value. */
    u: positive.optional(),
    uRel: positive.optional(),
    /** Of a peak acceleration: the bandwidth within which it is meant; absent: the peak itself. */
    bandwidthHz: positive.optional(),
  })
  .refine((w) => (w.u === undefined) !== (w.uRel === undefined), 'needs either u or uRel')
  .refine(
    (w) => w.bandwidthHz === undefined || w.quantity === 'tip.peakAcceleration',
    'bandwidthHz belongs to tip.peakAcceleration alone',
  );

export const planSchema = z.strictObject({
  schema: z.literal('tetherfall/plan/1'),
  wanted: z.array(wanted).min(1),
  /** Absent: a plain drop. */
  tether: z
    .strictObject({
      lengthM: positive,
      /** The peak that is expected; absent: from links and separation. */
      peakAccelerationMps2: positive.optional(),
      links: z.int().min(2).optional(),
      separationM: notNegative.optional(),
    })
    .optional(),
  ball: z.strictObject({ diameterM: positive, massKg: positive }).optional(),
  /** How far the ball is seen to fall; absent: 0.72 of the tether's length, at most 0.9 of the field of view. */
  fallM: positive.optional(),
  picture: z.strictObject({
    widthPx: z.int().min(16),
    heightPx: z.int().min(16),
    /** Height of the field of view in the plane of motion. */
    fieldHeightM: positive,
  }),
  camera: z
    .strictObject({
      highestCaptureRateHz: positive.optional(),
      uCaptureRateRel: positive.optional(),
      shortestExposureS: positive.optional(),
      distanceM: positive.optional(),
      uPlaneOffsetM: positive.optional(),
      uPitchRad: positive.optional(),
      /** What the lens leaves of distortion at the ends of the field, as a share. */
      uLensRel: positive.optional(),
    })
    .prefault({}),
  bar: z
    .strictObject({
      lengthM: positive.optional(),
      uLengthM: positive.optional(),
      uMarkPx: positive.optional(),
    })
    .prefault({}),
  /** Standard uncertainty of a body's place in a frame. */
  uPositionPx: positive.optional(),
  gMps2: positive.optional(),
});

export type PlanOrder = z.output<typeof planSchema>;
export type PlanOrderInput = z.input<typeof planSchema>;

export type ParsedPlan =
  | { readonly ok: true; readonly order: PlanOrder }
  | { readonly ok: false; readonly problems: readonly string[] };

/** Checks what was read from a plan file; one line for each problem: where, and what is wanted there. */
export function parsePlan(json: unknown): ParsedPlan {
  const parsed = planSchema.safeParse(json);
  if (parsed.success) return { ok: true, order: parsed.data };
  const problems = parsed.error.issues.map((issue) => {
    const where = issue.path
      .map((part, i) => (typeof part === 'number' ? `[${part}]` : `${i === 0 ? '' : '.'}${String(part)}`))
      .join('');
    return `${where === '' ? 'the plan' : where}: ${issue.message.replace(/^Invalid input: /, '')}`;
  });
  return { ok: false, problems };
}
