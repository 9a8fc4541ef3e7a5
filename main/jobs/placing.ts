import { lensProblem } from '../../analysis/scale/scaleProblems.ts';
import type { Sheet } from '../../analysis/sheet/sheet.ts';
import { halfOf } from '../../analysis/track/patchModel.ts';
import type { PlacedBody } from '../../analysis/track/sighting.ts';
import type { Picture } from '../../analysis/track/track.ts';
import { trackability } from '../../analysis/track/trackability.ts';
import { Refusal } from '../refusal.ts';

/** The pixels' noise around a body as it was placed; refuses a place that cannot be followed. */
export function noiseOrRefuse(body: PlacedBody, picture: Picture): number {
  const half = halfOf(body.patchPx);
  const where = `bodies: "${body.id}" at x ${body.xPx}, y ${body.yPx} in frame ${body.frame}`;
  if (2 * half + 1 > Math.min(picture.widthPx, picture.heightPx)) {
    throw new Refusal(
      'patchTooLarge',
      2,
      `${where}: its patch of ${body.patchPx} px is larger than the picture (${picture.widthPx} × ${picture.heightPx} px); make patchPx smaller.`,
    );
  }
  const judged = trackability(picture, Math.round(body.xPx), Math.round(body.yPx), half);
  if (judged.ok) return judged.noise;
  const reason =
    judged.reason === 'featureless'
      ? 'the patch shows nothing but an even background'
      : 'the patch shows only a straight edge, along which it could slide';
  throw new Refusal(
    'bodyFeatureless',
    2,
    `${where}: ${reason}; place it on the body, or make patchPx larger.`,
  );
}

export function refuseUnfitLens(sheet: Sheet, picture: Picture): void {
  const problem = lensProblem(sheet, picture);
  if (problem) throw new Refusal(problem.code, 2, problem.text);
}

export function refuseMarksOutside(sheet: Sheet, picture: Picture): void {
  const marks = [
    ...sheet.bodies.flatMap((b) => [
      { name: `bodies: "${b.id}"`, x: b.x, y: b.y },
      ...(b.marks ?? []).map((m) => ({
        name: `bodies: the mark of "${b.id}" in frame ${m.frame}`,
        x: m.x,
        y: m.y,
      })),
    ]),
    ...sheet.scale.bars.flatMap((bar, i) => [
      { name: `scale.bars[${i}].a`, ...bar.a },
      { name: `scale.bars[${i}].b`, ...bar.b },
    ]),
    ...(sheet.scale.plumb
      ? [
          { name: 'scale.plumb.a', ...sheet.scale.plumb.a },
          { name: 'scale.plumb.b', ...sheet.scale.plumb.b },
        ]
      : []),
    ...(sheet.scale.fiducials ?? []).map((f, i) => ({ name: `scale.fiducials[${i}]`, x: f.x, y: f.y })),
    ...(sheet.camera?.straightLines ?? []).flatMap((line, i) =>
      line.map((p, k) => ({ name: `camera.straightLines[${i}][${k}]`, ...p })),
    ),
  ];
  const outside = marks.filter(
    (m) => m.x < -0.5 || m.y < -0.5 || m.x > picture.widthPx - 0.5 || m.y > picture.heightPx - 0.5,
  );
  if (outside.length === 0) return;
  const named = outside.map((m) => `${m.name} at x ${m.x}, y ${m.y}`).join('; ');
  throw new Refusal(
    'markOutside',
    2,
    `Outside the picture (${picture.widthPx} × ${picture.heightPx} px): ${named}. Set the mark again.`,
  );
}
