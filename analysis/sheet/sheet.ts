import { z } from 'zod';
import { loadCellSchema } from './loadCell.ts';
import { motionSettingsSchema } from './motionSettings.ts';
import { theorySettingsSchema } from './theorySettings.ts';

/**
 * What the technician states about a drop. Units are in the names (SI); `u…` is a standard uncertainty (k = 1).
 * Pixels: x right, y down, integer at pixel centres, origin at the centre of the top-left pixel of the frame as displayed.
 */

const finite = z.number().refine(Number.isFinite, 'must be a finite number');
const positive = finite.refine((v) => v > 0, 'must be greater than 0');
const notNegative = finite.refine((v) => v >= 0, 'must not be negative');
const frameNumber = z.int().min(0);

const pixelPoint = z.object({ x: finite, y: finite });

/** A clock that is seen in the picture: what passed on it from one frame to another. */
const secondClock = z
  .object({
    fromFrame: frameNumber,
    toFrame: frameNumber,
    intervalS: positive,
    /** Standard uncertainty of the interval as read. */
    uIntervalS: notNegative.optional(),
  })
  .refine((c) => c.toFrame > c.fromFrame, 'needs toFrame after fromFrame');

/** With another kind than "secondClock", a second clock is held against the times that are used. */
const clock = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('captureRate'),
    captureRateHz: positive,
    uCaptureRateRel: notNegative.optional(),
    secondClock: secondClock.optional(),
  }),
  z.object({
    kind: z.literal('container'),
    /** Relative standard uncertainty of intervals by the file's own times. */
    uTimeRel: notNegative.optional(),
    secondClock: secondClock.optional(),
  }),
  z.object({
    kind: z.literal('timestamps'),
    path: z.string().min(1),
    /** Relative standard uncertainty of intervals by the list of times. */
    uTimeRel: notNegative.optional(),
    secondClock: secondClock.optional(),
  }),
  z.object({ kind: z.literal('secondClock'), secondClock }),
]);

/** Brown radial model: undistorted = centre + (distorted - centre) (1 + k1 r² + k2 r⁴), r = distance / radiusPx. */
const lens = z.object({
  k1: finite,
  k2: finite.default(0),
  centre: pixelPoint,
  radiusPx: positive,
  uK1: notNegative.optional(),
  uK2: notNegative.optional(),
  /** Correlation of k1 and k2. */
  rK1K2: finite.min(-1).max(1).optional(),
});

const camera = z.object({
  exposureS: notNegative.optional(),
  /** Delay between the exposures of neighbouring sensor rows; 0 for a global shutter. */
  rowTimeS: finite.optional(),
  lens: lens.optional(),
  /** Places along edges that are straight in truth, three or more to each: the lens is estimated from them where none is given. */
  straightLines: z.array(z.array(pixelPoint).min(3)).min(1).optional(),
});

const bar = z.object({
  a: pixelPoint,
  b: pixelPoint,
  lengthM: positive,
  uLengthM: notNegative.optional(),
  /** Standard uncertainty of one mark along each axis. */
  uMarkPx: notNegative.optional(),
  /** Find the centres of the targets at the marks in the first frame; their uncertainty then comes from the picture. */
  refine: z.boolean().optional(),
});

const fiducial = z.object({
  x: finite,
  y: finite,
  worldXM: finite,
  worldYM: finite,
  /** Standard uncertainty of the mark along each axis. */
  uMarkPx: notNegative.optional(),
  /** Standard uncertainty of its known position along each axis. */
  uWorldM: notNegative.optional(),
  /** Find the centre of the target at the mark in the first frame. */
  refine: z.boolean().optional(),
});

const scale = z.object({
  bars: z.array(bar).default([]),
  plumb: z.object({ a: pixelPoint, b: pixelPoint }).optional(),
  fiducials: z.array(fiducial).optional(),
  /** No bar was filmed: take the scale at which the reference body falls with local gravity. The gravity check is lost. */
  fromGravity: z.literal(true).optional(),
  /** How far the bodies' plane is in front of (+) the plane of the scale bar, towards the camera. */
  planeOffsetM: finite.optional(),
  uPlaneOffsetM: notNegative.optional(),
  cameraDistanceM: positive.optional(),
  /**
   * How far the camera looks down (+) on the plane of the fall: its upper end is then nearer. With fiducials, which show the
   * camera's own pitch: how far their plane leans back from the plane of the fall.
   */
  pitchDeg: finite.min(-30).max(30).optional(),
  uPitchDeg: notNegative.optional(),
  /** How far the camera is turned so that the left side of the plane is nearer (+). */
  yawDeg: finite.min(-30).max(30).optional(),
  uYawDeg: notNegative.optional(),
  /** Find the pitch from the reference body's fall: it leaves a mark of its own there. Needs cameraDistanceM; drag must be known. */
  pitchFromFall: z.literal(true).optional(),
});

const site = z.union([
  z.object({ gMps2: positive, uGMps2: notNegative.optional() }),
  z.object({ latitudeDeg: finite.min(-90).max(90), heightM: finite.optional() }),
]);

const ambient = z.object({
  temperatureC: finite.min(-80).max(80).optional(),
  uTemperatureC: notNegative.optional(),
  pressurePa: positive.optional(),
  uPressurePa: notNegative.optional(),
  relativeHumidity: finite.min(0).max(1).optional(),
  uRelativeHumidity: notNegative.optional(),
});

const body = z.object({
  id: z.string().min(1).max(40),
  role: z.enum(['tip', 'reference', 'other']),
  /** The frame in which the body was placed at (x, y). */
  frame: frameNumber.default(0),
  x: finite,
  y: finite,
  /** Side of the square patch that is followed. */
  patchPx: finite.min(5).max(401).optional(),
  diameterM: positive.optional(),
  uDiameterM: notNegative.optional(),
  massKg: positive.optional(),
  uMassKg: notNegative.optional(),
  /** Drag coefficient referred to the circle of diameterM, for a body that is no smooth sphere; absent: the standard drag curve. */
  dragCoefficient: positive.optional(),
  uDragCoefficient: notNegative.optional(),
  /** Places set by hand; they win over what was tracked. */
  marks: z.array(z.object({ frame: frameNumber, x: finite, y: finite })).optional(),
});

const tether = z.object({
  lengthM: positive,
  uLengthM: notNegative.optional(),
  /** Horizontal distance of the two ends before release. */
  separationM: notNegative.optional(),
  massKg: positive.optional(),
  uMassKg: notNegative.optional(),
  links: z.int().min(1).optional(),
  /** Mass at the free end that is not tether: clamp, hook, and the marker that is followed. 0 says that there is none. */
  tipMassKg: notNegative.optional(),
  uTipMassKg: notNegative.optional(),
});

const limit = z
  .object({
    quantity: z.string().min(1),
    max: finite.optional(),
    min: finite.optional(),
    unit: z.string().min(1),
    rule: z.enum(['guarded', 'simple']).default('guarded'),
  })
  .refine((l) => l.max !== undefined || l.min !== undefined, 'needs a max or a min');

export const sheetSchema = z.object({
  schema: z.literal('tetherfall/sheet/1'),
  footage: z.object({
    path: z.string().min(1),
    firstFrame: frameNumber.default(0),
    lastFrame: frameNumber.optional(),
  }),
  clock,
  camera: camera.optional(),
  scale,
  /** Pixel that is the origin of the world; default: the tip's start, else the first body's. */
  origin: pixelPoint.optional(),
  site: site.optional(),
  ambient: ambient.optional(),
  bodies: z.array(body).min(1),
  tether: tether.optional(),
  /** How velocity and acceleration are worked out; absent: the adaptive method. */
  motion: motionSettingsSchema.optional(),
  theory: theorySettingsSchema.optional(),
  loadCell: loadCellSchema.optional(),
  limits: z.array(limit).default([]),
});

/** The sheet as checked: defaults of structure filled in, missing uncertainties still missing. */
export type Sheet = z.output<typeof sheetSchema>;
/** The sheet as written. */
export type SheetInput = z.input<typeof sheetSchema>;
export type SheetBody = Sheet['bodies'][number];
export type SheetBar = Sheet['scale']['bars'][number];
export type SheetFiducial = NonNullable<Sheet['scale']['fiducials']>[number];
export type SheetLimit = Sheet['limits'][number];
