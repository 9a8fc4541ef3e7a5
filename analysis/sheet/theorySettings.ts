import { z } from 'zod';

const finite = z.number().refine(Number.isFinite, 'must be a finite number');

/** Names of the models, as sheet and result have them. */
export const modelNameSchema = z.enum([
  'freeFall',
  'freeFallDrag',
  'foldedTetherEnergy',
  'foldedTetherMomentum',
  'foldedTetherShare',
  'foldedTetherEndWeight',
  'linkedTether',
]);
export type ModelName = z.output<typeof modelNameSchema>;

/** What is asked of the theory beyond its usual answer. */
export const theorySettingsSchema = z.object({
  /** Models to hold the tracks against; absent: all. The linked tether has a name in results, but cannot be asked for yet. */
  models: z
    .array(modelNameSchema.exclude(['linkedTether']))
    .min(1)
    .optional(),
  /** Bounds of parameters, narrower than those of the models: a model that has no value within them is left out. */
  bounds: z
    .array(
      z
        .object({ parameter: z.string().min(1), min: finite.optional(), max: finite.optional() })
        .refine(
          (b) => (b.min ?? Number.NEGATIVE_INFINITY) <= (b.max ?? Number.POSITIVE_INFINITY),
          'needs min ≤ max',
        ),
    )
    .default([]),
  /** Let single positions that are far off count less: after Huber, or after a Student distribution of 4 degrees of freedom. */
  robust: z.enum(['huber', 'student']).optional(),
  /** Parameters whose profile likelihood is wanted. */
  profiles: z.array(z.string().min(1)).default([]),
});

export type TheorySettings = z.output<typeof theorySettingsSchema>;
