import type { RelativeSource, WorldTrack } from '../motion/worldTrack.ts';
import type { Settled } from '../sheet/assumptions.ts';
import type { Finding, KeyValue } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { airOf } from '../theory/air.ts';
import type { LocalGravity } from '../theory/normalGravity.ts';
import type { StatedBall } from './ballInputs.ts';
import { mainFall } from './mainFall.ts';
import { scaleFromGravity } from './scaleFromGravity.ts';

type Bar = Settled['bars'][number];

export interface FallAsBar {
  /** Two places in the picture and how far they are apart, as a scale bar would say. */
  readonly bar: Bar;
  readonly finding: Finding;
}

/** Any bar will do to have the fall along down in pixels: 1 px is 1 "m". */
export const pixelBar: Bar = {
  a: { x: 0, y: 0 },
  b: { x: 0, y: 1000 },
  lengthM: 1000,
  uLengthM: 1,
  uMarkPx: 1,
};

/** What the sheet says of the reference body, where drag and buoyancy can be taken into account. */
export function ballIn(sheet: Sheet): StatedBall | null {
  const body = sheet.bodies.find((b) => b.role === 'reference');
  if (body?.diameterM === undefined || body.massKg === undefined) return null;
  return { ...body, diameterM: body.diameterM, massKg: body.massKg };
}

/**
 * The ball's fall as the scale bar that was not filmed (`scale.fromGravity`).
 *
 * @param fallPx    the reference body's track by a calibration with `pixelBar`: its metres are pixels along down
 * @param metrePerUnit  metres in one pixel of that calibration (`Calibration.metrePerPx`: the lens may stretch the bar)
 * @returns null where there is too little of a fall
 */
export function fallAsBar(
  fallPx: WorldTrack,
  metrePerUnit: number,
  sheet: Sheet,
  settled: Settled,
  gravity: LocalGravity,
): FallAsBar | null {
  const fall = mainFall(fallPx);
  if (!fall) return null;
  const of = (values: Float64Array) => Float64Array.from(fall.used, (i) => values[i]);
  const found = scaleFromGravity(
    {
      afterS: of(fallPx.timeS).map((t) => t - fall.restS),
      downPx: of(fallPx.yM).map((y) => -y / metrePerUnit),
      uPx: of(fallPx.uYM).map((u) => u / metrePerUnit),
    },
    gravity,
    ballIn(sheet),
    airOf(sheet.ambient),
    [{ source: 'capture rate', uRel: settled.uCaptureRateRel }],
  );
  if (!found) return null;
  // The calibration made `metrePerUnit` of its bar's 1000 m; this bar's length makes it what gravity says.
  const lengthM = (pixelBar.lengthM * found.metrePerPx) / metrePerUnit;
  const largest = [...found.contributions].sort((a, b) => b.u - a.u)[0];
  return {
    bar: { ...pixelBar, lengthM, uLengthM: found.uRel * lengthM, uMarkPx: 0 },
    finding: {
      level: 'caution',
      code: 'scaleFromGravity',
      text: `No scale bar: the scale is that at which the reference body falls with local gravity, ${Number((1000 * found.metrePerPx).toPrecision(5))} mm in a pixel within ${Number((100 * found.uRel).toPrecision(2))} % (mostly: ${largest.source}). ball.g and the gravity check are lost: nothing tests scale and clock any more, and an error of the clock is in every length twice.`,
    },
  };
}

/** The bar's length in a budget by the name of what it is. */
export function asGravity(source: RelativeSource): RelativeSource {
  return source.source === 'scale bar length' ? { ...source, source: 'scale from gravity' } : source;
}

/** What is left of key values and findings where gravity has made the scale: its own check would only find itself again. */
export function withoutGravityCheck<T extends { keyValues: KeyValue[]; findings: Finding[] }>(derived: T): T {
  return {
    ...derived,
    keyValues: derived.keyValues.filter((k) => k.quantity !== 'ball.g'),
    findings: derived.findings.filter((f) => f.code !== 'gravityAgrees' && f.code !== 'gravityDisagrees'),
  };
}
