import type { WideSearch } from '../../../analysis/track/track.ts';
import type { MovingBody } from '../../../fixtures/movingBody.ts';
import { followMade } from './followMade.ts';

/** Mean error at each sub-pixel phase of a body that moves slowly. */
export interface PhaseSweep {
  readonly name: string;
  /** Half of the distance between the largest and the smallest mean [px]. */
  readonly halfAmplitudeX: number;
  readonly halfAmplitudeY: number;
  /** Standard error of one phase's mean [px]: what the half-amplitude shows without any locking is about twice this. */
  readonly uMean: number;
  readonly meansX: readonly number[];
  readonly meansY: readonly number[];
}

const phases = 20;
const restFrames = 25;
const movingFrames = 500;

/** The sweeps: looks, and optics sharper than usual. */
export const sweeps: readonly {
  name: string;
  quick: boolean;
  body: Pick<MovingBody, 'look' | 'sizePx'> & Partial<MovingBody>;
}[] = [
  { name: 'bullseye 24 px', quick: true, body: { look: 'bullseye', sizePx: 24 } },
  { name: 'quadrant 24 px', quick: false, body: { look: 'quadrant', sizePx: 24 } },
  { name: 'ball 30 px', quick: true, body: { look: 'ball', sizePx: 30 } },
  { name: 'bead 12 px', quick: false, body: { look: 'bead', sizePx: 12 } },
  {
    name: 'bullseye 24 px, textured',
    quick: false,
    body: { look: 'bullseye', sizePx: 24, background: 'textured' },
  },
  {
    name: 'bullseye 24 px, optics 0.5 px',
    quick: false,
    body: { look: 'bullseye', sizePx: 24, psfSigmaPx: 0.5 },
  },
  {
    name: 'bullseye 24 px, optics 0.35 px',
    quick: false,
    body: { look: 'bullseye', sizePx: 24, psfSigmaPx: 0.35 },
  },
];

export async function phaseSweep(
  { name, body }: (typeof sweeps)[number],
  search: WideSearch,
): Promise<PhaseSweep> {
  const margin = body.sizePx + 8;
  // Speeds that step through the phases without repeating soon.
  const [speedX, speedY] = [0.10251, 0.09753];
  const errors = await followMade(
    {
      widthPx: Math.ceil(2 * margin + movingFrames * speedX),
      heightPx: Math.ceil(2 * margin + movingFrames * speedY),
      frameCount: restFrames + movingFrames,
      noiseSigma: 0.5,
      path: (timeS) => {
        const n = Math.max(0, timeS * 1000 - restFrames);
        return { x: margin + 0.3 + speedX * n, y: margin + 0.2 + speedY * n };
      },
      ...body,
    },
    search,
  );
  const x = phaseMeans(errors.frames, errors.errorX, errors.truth.xPx);
  const y = phaseMeans(errors.frames, errors.errorY, errors.truth.yPx);
  return {
    name,
    halfAmplitudeX: x.halfAmplitude,
    halfAmplitudeY: y.halfAmplitude,
    uMean: Math.max(x.uMean, y.uMean),
    meansX: x.means,
    meansY: y.means,
  };
}

function phaseMeans(frames: readonly number[], errors: readonly number[], truth: Float64Array) {
  const bins: number[][] = Array.from({ length: phases }, () => []);
  frames.forEach((n, i) => {
    if (n < restFrames) return;
    const phase = truth[n] - Math.floor(truth[n]);
    bins[Math.min(phases - 1, Math.floor(phase * phases))].push(errors[i]);
  });
  const mean = (values: readonly number[]) => values.reduce((s, v) => s + v, 0) / values.length;
  const all = mean(bins.flat());
  const means = bins.map((b) => mean(b) - all);
  const within = mean(bins.map((b) => mean(b.map((e) => (e - mean(b)) ** 2)) / b.length));
  return {
    means,
    halfAmplitude: (Math.max(...means) - Math.min(...means)) / 2,
    uMean: Math.sqrt(within),
  };
}
