import type { Result } from '../../analysis/sheet/result.ts';
import { sheetSchema } from '../../analysis/sheet/sheet.ts';
import type { NewReduction } from '../../main/log/log.ts';

/** A small reduction of the right shape: what the log keeps, not what it means. */
export function reductionExample(changes: Partial<Result> = {}, footagePath = '/rig/clip.mp4'): NewReduction {
  const sheet = sheetSchema.parse({
    schema: 'tetherfall/sheet/1',
    footage: { path: 'clip.mp4' },
    clock: { kind: 'captureRate', captureRateHz: 1000 },
    scale: { bars: [{ a: { x: 1, y: 2 }, b: { x: 1, y: 702 }, lengthM: 0.7 }] },
    bodies: [{ id: 'ball', role: 'reference', x: 40, y: 50 }],
  });
  const result: Result = {
    schema: 'tetherfall/result/1',
    program: { name: 'tetherfall', version: '1.2.3', commit: 'abc' },
    inputs: {
      sheetSha256: 'a'.repeat(64),
      footageSha256: 'f'.repeat(64),
      footage: {
        widthPx: 640,
        heightPx: 800,
        bitDepth: 8,
        frameCount: 9,
        codec: 'rawvideo',
        pixelFormat: 'gray',
        lumaRule: 'coded',
        decoder: 'memory 1',
      },
    },
    frames: [],
    motion: {},
    keyValues: [],
    theory: [],
    verdicts: [],
    findings: [],
    ...changes,
  };
  return { sheet, result, footagePath };
}

export function ballG(value: number, u: number): Result['keyValues'][number] {
  return {
    quantity: 'ball.g',
    value,
    u,
    unit: 'm/s2',
    dof: null,
    U95: 1.96 * u,
    k: 1.96,
    budget: [{ source: 'scale bar length', u }],
  };
}
