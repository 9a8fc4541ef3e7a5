import type { BallFall } from '../motion/ballFall.ts';
import type { Common } from '../motion/worldTrack.ts';
import type { Finding, KeyValue } from '../sheet/result.ts';
import type { LocalGravity } from '../theory/normalGravity.ts';
import { uSphereDragRel } from '../theory/sphereDrag.ts';
import { formatMeasured } from '../uncertainty/formatMeasured.ts';
import { measured } from '../uncertainty/measured.ts';
import { commonSources } from './commonSources.ts';

/** ball.g: acceleration of the reference body, freed from drag and buoyancy where diameter and mass are stated. */
export function gravityOf(fall: BallFall, common: Common): KeyValue {
  const g = fall.gMps2;
  return measured(
    'ball.g',
    g,
    'm/s2',
    [
      ...commonSources(common, g, { length: 1, time: -2 }),
      { source: 'positions', u: fall.uFitMps2, dof: fall.dof },
      { source: 'drag of the ball', u: Math.abs(fall.perDragMps2 * uSphereDragRel) / 0.1 },
      // Down known to u: the fall along it is shorter by the cosine, g u²/2 on average; taken as a standard uncertainty.
      { source: 'direction of down', u: (g * common.uDownRad ** 2) / 2 },
    ],
    {
      definition: fall.air
        ? 'least squares over the fall after release, drag, buoyancy and added mass of the air taken off'
        : 'least squares over the fall after release; drag not taken off (diameter or mass not stated)',
    },
  );
}

/** The gravity check: g from the reference body against local gravity. It tests scale and clock together. */
export function gravityCheck(ball: KeyValue, gravity: LocalGravity): Finding {
  const u = Math.hypot(ball.u, gravity.uGMps2);
  const off = ball.value - gravity.gMps2;
  const times = Math.abs(off) / u;
  const figures = `ball.g is ${formatMeasured(ball.value, ball.u, ball.unit)}, local gravity ${formatMeasured(gravity.gMps2, gravity.uGMps2, 'm/s2')}`;
  if (times <= 2) {
    return {
      level: 'note',
      code: 'gravityAgrees',
      text: `${figures}: they agree (${times.toFixed(1)} times their standard uncertainty).`,
    };
  }
  const percent = (100 * Math.abs(off)) / gravity.gMps2;
  return {
    level: 'caution',
    code: 'gravityDisagrees',
    text: `${figures}: they differ by ${percent.toPrecision(2)} %, ${times.toFixed(1)} times their standard uncertainty. Check the scale bar (${percent.toPrecision(2)} % of its length), the capture rate (${(percent / 2).toPrecision(2)} % of it), the plane of motion and the camera's tilt.`,
  };
}
