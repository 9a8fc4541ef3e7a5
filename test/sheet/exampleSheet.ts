import type { SheetInput } from '../../analysis/sheet/sheet.ts';

/** A complete sheet as a technician would state it: the base that tests change. */
export function exampleSheet(): SheetInput & Record<string, unknown> {
  return {
    schema: 'tetherfall/sheet/1',
    footage: { path: 'drop.mp4', firstFrame: 0, lastFrame: 412 },
    clock: { kind: 'captureRate', captureRateHz: 1000, uCaptureRateRel: 1e-5 },
    camera: {
      exposureS: 0.0002,
      rowTimeS: 0,
      lens: { k1: 0, k2: 0, centre: { x: 319.5, y: 399.5 }, radiusPx: 512, uK1: 0.0003 },
    },
    scale: {
      bars: [
        { a: { x: 60.2, y: 40 }, b: { x: 60.4, y: 741.3 }, lengthM: 0.7, uLengthM: 0.0005, uMarkPx: 0.3 },
      ],
      plumb: { a: { x: 10, y: 20 }, b: { x: 11, y: 700 } },
      planeOffsetM: 0,
      uPlaneOffsetM: 0.002,
      cameraDistanceM: 3,
      uPitchDeg: 0.1,
      uYawDeg: 0.3,
    },
    site: { gMps2: 9.8123, uGMps2: 0.0001 },
    ambient: { temperatureC: 21, pressurePa: 100800, relativeHumidity: 0.45 },
    bodies: [
      { id: 'tip', role: 'tip', frame: 0, x: 310.1, y: 52.7, patchPx: 25 },
      {
        id: 'ball',
        role: 'reference',
        frame: 0,
        x: 402.8,
        y: 53.1,
        patchPx: 31,
        diameterM: 0.02,
        massKg: 0.0327,
      },
    ],
    tether: { lengthM: 0.9, uLengthM: 0.001, separationM: 0.03, massKg: 0.21, links: 90, tipMassKg: 0 },
    limits: [{ quantity: 'tip.peakAcceleration', max: 900, unit: 'm/s2', rule: 'guarded' }],
  };
}
