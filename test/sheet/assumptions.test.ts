import { describe, expect, it } from 'vitest';
import { settle } from '../../analysis/sheet/assumptions.ts';
import { sheetSchema } from '../../analysis/sheet/sheet.ts';
import { exampleSheet } from './exampleSheet.ts';

describe('settle', () => {
  it('assumes nothing where everything is stated', () => {
    expect(settle(sheetSchema.parse(exampleSheet())).findings).toEqual([]);
  });

  it('lists every uncertainty it had to assume, each with its field', () => {
    const sheet = exampleSheet();
    sheet.clock = { kind: 'captureRate', captureRateHz: 1000 };
    sheet.scale = { bars: [{ a: { x: 0, y: 0 }, b: { x: 0, y: 500 }, lengthM: 0.5 }] };
    delete sheet.camera;
    const texts = settle(sheetSchema.parse(sheet))
      .findings.map((f) => f.text)
      .join('\n');
    for (const field of [
      'clock.uCaptureRateRel',
      'camera.exposureS',
      'uLengthM',
      'uMarkPx',
      'scale.planeOffsetM',
      'scale.cameraDistanceM',
      'scale.uPlaneOffsetM',
      'scale.uPitchDeg',
      'scale.uYawDeg',
      'camera.lens',
      'scale.plumb',
    ]) {
      expect(texts).toContain(field);
    }
  });

  it('lists what it takes for clock, site, air and tether that are stated in part', () => {
    const sheet = exampleSheet();
    sheet.clock = { kind: 'secondClock', secondClock: { fromFrame: 0, toFrame: 100, intervalS: 0.1 } };
    sheet.site = { latitudeDeg: 52 };
    delete sheet.ambient;
    sheet.tether = { lengthM: 1 };
    sheet.bodies = [
      { id: 'ball', role: 'reference', x: 1, y: 1, patchPx: 25, diameterM: 0.02, massKg: 0.03 },
    ];
    const settled = settle(sheetSchema.parse(sheet));
    const texts = settled.findings.map((f) => f.text).join('\n');
    for (const field of [
      'clock.secondClock.uIntervalS',
      'site.heightM',
      'ambient.temperatureC',
      'ambient.pressurePa',
      'ambient.relativeHumidity',
      'tether.uLengthM',
    ]) {
      expect(texts).toContain(field);
    }
    expect(settled.tether?.uLengthM).toBe(0.001);
    // half a frame of 1 ms at each end, over 100 ms
    expect(settled.uCaptureRateRel).toBeCloseTo((0.001 * Math.sqrt(2 / 12)) / 0.1, 12);
  });
});
