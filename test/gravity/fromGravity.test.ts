import { describe, expect, it } from 'vitest';
import { reduce } from '../../analysis/reduce.ts';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import { type SheetInput, sheetSchema } from '../../analysis/sheet/sheet.ts';
import type { Track } from '../../analysis/track/track.ts';
import { fallingBall } from '../../fixtures/physics/fallingBall.ts';
import { seededRandom } from '../../fixtures/random.ts';

const gMps2 = 9.8123;
const rateHz = 500;
const pxPerM = 1400;
const ball = { diameterM: 0.02, massKg: 0.0327 };
const at = fallingBall(
  { ...ball, gMps2, air: { densityKgpm3: 1.19, viscosityPas: 1.82e-5 }, drag: 0.41, buoyancy: true },
  0.6,
);

/** A drop without a scale bar: one ball at rest for 0.1 s, then falling for 0.35 s. */
function sheetOf(change: Partial<SheetInput['scale']> = {}): SheetInput {
  return {
    schema: 'tetherfall/sheet/1',
    footage: { path: 'drop.mp4' },
    clock: { kind: 'captureRate', captureRateHz: rateHz, uCaptureRateRel: 1e-5 },
    camera: { exposureS: 1e-4 },
    scale: { fromGravity: true, plumb: { a: { x: 10, y: 0 }, b: { x: 10, y: 1000 } }, ...change },
    site: { gMps2, uGMps2: 0.0005 },
    ambient: { temperatureC: 20, pressurePa: 101_000, relativeHumidity: 0.5 },
    bodies: [{ id: 'ball', role: 'reference', x: 100, y: 50, patchPx: 25, ...ball }],
  };
}

function ballTrack(falls = true): Track {
  const count = 225;
  const random = seededRandom(4);
  const each = (of: (n: number) => number) => Float64Array.from({ length: count }, (_, n) => of(n));
  const drop = (n: number) => (falls ? -at(n / rateHz - 0.1).yM : 0);
  return {
    bodyId: 'ball',
    frame: Int32Array.from({ length: count }, (_, n) => n),
    xPx: each(() => 100 + 0.03 * random.gaussian()),
    yPx: each((n) => 50 + pxPerM * drop(n) + 0.03 * random.gaussian()),
    uXPx: each(() => 0.03),
    uYPx: each(() => 0.03),
    score: each(() => 0.99),
    state: Array.from({ length: count }, () => 'measured'),
  };
}

const reduced = (sheet: SheetInput, track = ballTrack()) =>
  reduce({
    sheet: sheetSchema.parse(sheet),
    program: { name: 'tetherfall', version: '0', commit: 'none' },
    inputs: {
      sheetSha256: '',
      footageSha256: '',
      footage: {
        widthPx: 200,
        heightPx: 1000,
        bitDepth: 8,
        frameCount: 225,
        codec: '',
        pixelFormat: '',
        lumaRule: '',
        decoder: '',
      },
    },
    timeS: Float64Array.from({ length: 225 }, (_, n) => n / rateHz),
    tracks: [track],
    findings: [],
  });
const codes = (sheet: SheetInput) => checkSheet(sheetSchema.parse(sheet)).map((f) => `${f.level} ${f.code}`);

describe('a drop without a scale bar', () => {
  it('takes its scale from the fall, says so, and gives up ball.g and its check', () => {
    const { motion, keyValues, findings } = reduced(sheetOf());
    const { measuredYM } = motion.ball;
    const fallM = measuredYM[0] - measuredYM[measuredYM.length - 1];
    // u of the scale is about 0.02 %: drag, local gravity, positions
    expect(Math.abs(fallM / -at(224 / rateHz - 0.1).yM - 1)).toBeLessThan(0.0006);
    expect(keyValues.map((k) => k.quantity)).not.toContain('ball.g');
    const told = findings.map((f) => f.code);
    expect(told).toContain('scaleFromGravity');
    expect(told).not.toContain('gravityAgrees');
    const finding = findings.find((f) => f.code === 'scaleFromGravity');
    expect(finding).toMatchObject({
      level: 'caution',
      text: expect.stringMatching(/0\.714\d+ mm in a pixel/),
    });
    expect(finding?.text).toContain('ball.g and the gravity check are lost');
  });

  it('gives nothing in metres when the ball does not fall', () => {
    const { motion, keyValues, findings } = reduced(sheetOf(), ballTrack(false));
    expect({ motion, keyValues }).toEqual({ motion: {}, keyValues: [] });
    expect(findings).toContainEqual(expect.objectContaining({ level: 'stop', code: 'scaleNotFromGravity' }));
  });

  it('is refused without a reference body, and without being asked for', () => {
    expect(codes({ ...sheetOf(), bodies: [{ id: 'tip', role: 'tip', x: 1, y: 1 }] })).toContain(
      'stop referenceMissing',
    );
    expect(codes(sheetOf({ fromGravity: undefined }))).toContain('stop scaleMissing');
  });

  it('keeps to a bar that was filmed after all', () => {
    const bar = { a: { x: 5, y: 0 }, b: { x: 5, y: 700 }, lengthM: 0.5, uLengthM: 0.0005, uMarkPx: 0.3 };
    expect(codes(sheetOf({ bars: [bar] }))).toContain('caution fromGravityNotUsed');
    const { keyValues, findings } = reduced(sheetOf({ bars: [bar] }));
    expect(keyValues.find((k) => k.quantity === 'ball.g')?.value).toBeCloseTo(gMps2, 1);
    expect(findings.map((f) => f.code)).not.toContain('scaleFromGravity');
  });
});
