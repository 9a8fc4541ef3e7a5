import { Refusal } from '../refusal.ts';
import type { StreamFacts } from './decoder.ts';
import type { FootageInput } from './footageInput.ts';
import { type PixelLayout, pixelLayout } from './pixelLayout.ts';

/** @throws Refusal (status 3) where there is no stated way from the footage's pixel format to luma */
export function layoutOf(input: FootageInput, facts: StreamFacts): PixelLayout {
  const layout = pixelLayout(facts.pixelFormat);
  if (layout !== null) return layout;
  throw new Refusal(
    'footagePixelFormat',
    3,
    `${input.name}: pixel format ${facts.pixelFormat} has no stated luma; export the footage as YUV, RGB or grey`,
  );
}
