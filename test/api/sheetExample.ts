import type { SheetInput } from '../../analysis/sheet/sheet.ts';

/** A sheet that can be reduced, with the least in it. */
export function sheetExample(footagePath = 'clip.mp4'): SheetInput {
  return {
    schema: 'tetherfall/sheet/1',
    footage: { path: footagePath },
    clock: { kind: 'captureRate', captureRateHz: 1000 },
    scale: { bars: [{ a: { x: 10, y: 10 }, b: { x: 10, y: 510 }, lengthM: 0.7 }] },
    bodies: [{ id: 'ball', role: 'reference', x: 100, y: 50 }],
  };
}
