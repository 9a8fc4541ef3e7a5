import type { WideSearch } from '../../../analysis/track/track.ts';
import type { MovingBody } from '../../../fixtures/movingBody.ts';
import { followMade } from './followMade.ts';

/** How the mean error of a body wanders that moves slowly for a long time. */
export interface Drift {
  readonly name: string;
  /** Mean error of the last frames less that of the first, per thousand frames [px]. */
  readonly xPer1000: number;
  readonly yPer1000: number;
  /** Standard error of these from noise alone [px]. */
  readonly u: number;
  readonly lost: number;
}

const frameCount = 2000;
const averaged = 200;

export const drifts: readonly { name: string; quick: boolean; wayPx: number; look: MovingBody['look'] }[] = [
  { name: 'bullseye 20 px, 80 px on its way', quick: true, wayPx: 80, look: 'bullseye' },
  { name: 'ball 20 px, 80 px on its way', quick: false, wayPx: 80, look: 'ball' },
  {
    name: 'bullseye 20 px, 12 px on its way: it never leaves its place',
    quick: false,
    wayPx: 12,
    look: 'bullseye',
  },
];

export async function drift(
  { name, wayPx, look }: (typeof drifts)[number],
  search: WideSearch,
): Promise<Drift> {
  const sizePx = 20;
  const margin = sizePx + 2;
  const errors = await followMade(
    {
      look,
      sizePx,
      widthPx: 2 * margin + 16,
      heightPx: Math.ceil(2 * margin + wayPx),
      frameCount,
      noiseSigma: 3,
      path: (timeS) => ({
        x: margin + 0.3 + (7 * timeS * 1000) / frameCount,
        y: margin + 0.2 + (wayPx * timeS * 1000) / frameCount,
      }),
    },
    search,
  );
  const between = (values: readonly number[]) => {
    const mean = (part: readonly number[]) => part.reduce((s, v) => s + v, 0) / part.length;
    const first = values.slice(0, averaged);
    const last = values.slice(-averaged);
    const variance = mean(first.map((e) => (e - mean(first)) ** 2));
    const thousands = (frameCount - averaged) / 1000;
    return {
      drift: (mean(last) - mean(first)) / thousands,
      u: Math.sqrt((2 * variance) / averaged) / thousands,
    };
  };
  const x = between(errors.errorX);
  const y = between(errors.errorY);
  return { name, xPer1000: x.drift, yPer1000: y.drift, u: Math.max(x.u, y.u), lost: errors.lost };
}
