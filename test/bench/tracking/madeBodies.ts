import type { MovingBody } from '../../../fixtures/movingBody.ts';
import type { GoalName } from './subject.ts';

/** A body filmed into memory, falling from rest. */
export interface MadeBody {
  readonly name: string;
  readonly goal: GoalName;
  readonly body: MovingBody;
  /** Listed by `--quick` too. */
  readonly quick: boolean;
}

export const restFrames = 25;
/** Seconds from frame to frame of every film here. */
export const frameTimeS = 0.001;

/** Falls from rest, drifting a little, with an acceleration in px per frame². */
function fall(startX: number, startY: number, accelerationPx: number): MovingBody['path'] {
  return (timeS) => {
    const n = Math.max(0, timeS / frameTimeS - restFrames);
    return { x: startX + 0.017 * n, y: startY + 0.5 * accelerationPx * n * n };
  };
}

function made(
  name: string,
  goal: GoalName,
  body: Pick<MovingBody, 'look' | 'sizePx'> & Partial<MovingBody>,
  { accelerationPx = 0.004, movingFrames = 275, quick = false } = {},
): MadeBody {
  const reach = Math.ceil(1.4 * body.sizePx) + 12;
  const way = 0.5 * accelerationPx * movingFrames ** 2;
  const seed = [...name].reduce((s, c) => (s * 31 + c.charCodeAt(0)) % 65521, 7);
  return {
    name,
    goal,
    quick,
    body: {
      widthPx: 2 * reach + 8,
      heightPx: Math.ceil(2 * reach + way),
      frameCount: restFrames + movingFrames,
      frameTimeS,
      path: fall(reach + 0.3, reach + 0.2, accelerationPx),
      seed,
      ...body,
    },
  };
}

function marker(look: MovingBody['look'], sizePx: number, noiseSigma: number, quick = false): MadeBody[] {
  const name = `${look} ${sizePx} px, noise ${noiseSigma}`;
  return [
    made(name, 'plain', { look, sizePx, noiseSigma }, { quick }),
    made(`${name}, textured`, 'textured', { look, sizePx, noiseSigma, background: 'textured' }, { quick }),
  ];
}

/** Blurred over 85 % of the frame time, up to a smear of so many pixels at the end of the fall. */
function blurred(look: MovingBody['look'], sizePx: number, blurPx: number, quick = false): MadeBody {
  const movingFrames = 160;
  const exposureShare = 0.85;
  const accelerationPx = blurPx / exposureShare / movingFrames;
  const body = { look, sizePx, noiseSigma: 3, exposureS: exposureShare * frameTimeS };
  return made(`${look} ${sizePx} px, blur to ${blurPx} px`, 'blurred', body, {
    accelerationPx,
    movingFrames,
    quick,
  });
}

function faint(look: MovingBody['look'], sizePx: number, quick = false): MadeBody {
  const body = { look, sizePx, noiseSigma: 3, light: 127, dark: 97 };
  return made(`${look} ${sizePx} px, faint`, 'faint', body, { quick });
}

export const madeBodies: readonly MadeBody[] = [
  ...marker('bullseye', 24, 1),
  ...marker('bullseye', 24, 3, true),
  ...marker('bullseye', 24, 6),
  ...marker('bullseye', 12, 3),
  ...marker('bullseye', 60, 3),
  // Its patch is 31 px wide: the size for which the time of the refinement is set.
  ...marker('bullseye', 21, 3),
  ...marker('quadrant', 24, 3),
  ...marker('ball', 30, 1),
  ...marker('ball', 30, 3, true),
  ...marker('ball', 30, 6),
  ...marker('bead', 6, 3),
  ...marker('bead', 12, 3),
  ...marker('linkEnd', 12, 3),
  ...marker('linkEnd', 24, 3),
  ...marker('boxCorner', 24, 3),
  blurred('bullseye', 24, 2),
  blurred('bullseye', 24, 8, true),
  blurred('quadrant', 24, 8),
  blurred('ball', 30, 8),
  faint('bullseye', 24, true),
  faint('quadrant', 24),
  faint('ball', 30),
  // A large body takes the maker long to paint: fewer frames.
  made(
    'boxCorner 60 px, noise 3',
    'plain',
    { look: 'boxCorner', sizePx: 60, noiseSigma: 3 },
    { movingFrames: 60, accelerationPx: 0.1 },
  ),
];
