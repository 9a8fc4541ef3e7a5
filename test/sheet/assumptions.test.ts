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
      'scale.plumb',
    ]) {
      expect(texts).toContain(field);
    }
  });
});
