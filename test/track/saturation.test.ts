import { describe, expect, it } from 'vitest';
import { saturatedShare } from '../../analysis/track/saturation.ts';

function disc(level: number, radius: number) {
  const luma = new Uint8Array(60 * 60).fill(90);
  for (let i = 0; i < luma.length; i++)
    if (Math.hypot((i % 60) - 30, Math.floor(i / 60) - 30) < radius) luma[i] = level;
  return { widthPx: 60, heightPx: 60, bitDepth: 8, luma };
}

describe('saturatedShare', () => {
  it('measures how much of a body is as bright as the camera can show', () => {
    // Area of the bright disc against that of the round patch: (8/12.5)².
    expect(saturatedShare(disc(255, 8), 30, 30, 12)).toBeCloseTo(0.41, 1);
  });

  it('does not mind a glint, nor a white that is within the range', () => {
    expect(saturatedShare(disc(255, 2), 30, 30, 12)).toBeNull();
    expect(saturatedShare(disc(200, 8), 30, 30, 12)).toBeNull();
  });
});
