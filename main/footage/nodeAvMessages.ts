import { z } from 'zod';

/** What the parent asks of the node-av process: one order, as one line on its input. */
export const nodeAvOrderSchema = z.object({
  task: z.enum(['version', 'describe', 'decode', 'count']),
  url: z.string(),
  /** Not empty for stills: the script of the concat demuxer. */
  script: z.string(),
  filter: z.string(),
  from: z.union([z.object({ frame: z.int() }), z.object({ pts: z.int() })]),
  /** null: to the end. */
  count: z.int().nullable(),
  /** What was described: decoding stops where this changes. */
  expected: z.object({ widthPx: z.int(), heightPx: z.int(), pixelFormat: z.string() }).nullable(),
});
export type NodeAvOrder = z.output<typeof nodeAvOrderSchema>;

const factsSchema = z.object({
  codec: z.string(),
  pixelFormat: z.string(),
  widthPx: z.int(),
  heightPx: z.int(),
  timeBase: z.object({ num: z.int(), den: z.int() }),
  clockwiseDeg: z.union([z.literal(0), z.literal(90), z.literal(180), z.literal(270)]).nullable(),
  videoStreamCount: z.int(),
  startS: z.number(),
  durationS: z.number().nullable(),
  frameRateHz: z.number().nullable(),
});

/** What the process answers. A frame's samples follow its message. */
export const nodeAvMessageSchema = z.discriminatedUnion('type', [
  z.object({ type: z.literal('version'), version: z.string() }),
  z.object({ type: z.literal('facts'), facts: factsSchema }),
  z.object({
    type: z.literal('noVideo'),
    hasVideo: z.boolean(),
    hasOther: z.boolean(),
    complaint: z.string().nullable(),
  }),
  z.object({ type: z.literal('frame'), pts: z.number().nullable(), bidirectional: z.boolean() }),
  z.object({
    type: z.literal('end'),
    complaint: z.string().nullable(),
    changed: z.string().nullable(),
    beforeComplaint: z.int(),
  }),
]);
export type NodeAvMessage = z.output<typeof nodeAvMessageSchema>;

/** Each message: length of its JSON, length of the samples after it (two 32-bit numbers, little-endian), JSON, samples. */
export const MESSAGE_HEAD_BYTES = 8;
