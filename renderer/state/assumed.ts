import { settle } from '../../analysis/sheet/assumptions.ts';
import { sheetSchema } from '../../analysis/sheet/sheet.ts';

/** What the reduction takes where a sheet is silent, asked of the very function that does it: by a sheet that states nothing it need not. */
const silent = settle(
  sheetSchema.parse({
    schema: 'tetherfall/sheet/1',
    footage: { path: '-' },
    clock: { kind: 'captureRate', captureRateHz: 1 },
    scale: { bars: [{ a: { x: 0, y: 0 }, b: { x: 1, y: 0 }, lengthM: 1 }], cameraDistanceM: 1 },
    bodies: [{ id: '-', role: 'tip', x: 0, y: 0 }],
  }),
);

export const assumedPatchPx = silent.patchPx[0];
export const assumedUCaptureRateRel = silent.uCaptureRateRel;
export const assumedExposureS = silent.exposureS;
export const assumedRowTimeS = silent.rowTimeS;
export const assumedULengthM = silent.bars[0]?.uLengthM;
export const assumedUMarkPx = silent.bars[0]?.uMarkPx;
export const assumedPlaneOffsetM = silent.planeOffsetM;
export const assumedUPlaneOffsetM = silent.uPlaneOffsetM;
export const assumedUPitchDeg = (silent.turn.uPitchRad * 180) / Math.PI;
export const assumedUYawDeg = (silent.turn.uYawRad * 180) / Math.PI;
export const assumedUDownDeg = (silent.uDownWithoutPlumbRad * 180) / Math.PI;
