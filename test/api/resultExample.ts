import type { Result } from '../../analysis/sheet/result.ts';

/** A result of the right shape with one key value: what the API carries, not what it means. */
export function resultExample(sheetSha256: string): Result {
  return {
    schema: 'tetherfall/result/1',
    program: { name: 'tetherfall', version: '1.2.3', commit: 'abc' },
    inputs: {
      sheetSha256,
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
    keyValues: [
      {
        quantity: 'ball.g',
        value: 9.81,
        u: 0.01,
        unit: 'm/s2',
        dof: null,
        U95: 0.02,
        k: 2,
        budget: [{ source: 'scale bar length', u: 0.01 }],
      },
    ],
    theory: [],
    verdicts: [],
    findings: [],
  };
}
