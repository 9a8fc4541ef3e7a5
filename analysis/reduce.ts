import { clockFindings } from './clock/clockFindings.ts';
import { rowTime } from './clock/rowTime.ts';
import { asGravity, ballIn, fallAsBar, pixelBar, withoutGravityCheck } from './gravity/fallAsBar.ts';
import { mainFall } from './gravity/mainFall.ts';
import { pitchFromFall } from './gravity/pitchFromFall.ts';
import { numbers } from './keyValues/numbers.ts';
import type { WorldTrack } from './motion/worldTrack.ts';
import { type Calibration, calibrate, type Turned } from './scale/calibrate.ts';
import type { PictureSize } from './scale/lensOf.ts';
import type { PixelPoint } from './scale/spaces.ts';
import { type Settled, settle } from './sheet/assumptions.ts';
import { checkSheet } from './sheet/checkSheet.ts';
import type { BodyInFrame, Finding, Result, ResultFrame } from './sheet/result.ts';
import type { Sheet } from './sheet/sheet.ts';
import { airOf } from './theory/air.ts';
import type { ForceRecord } from './theory/force/parseForceRecord.ts';
import { type LocalGravity, siteGravity } from './theory/normalGravity.ts';
import type { Track } from './track/track.ts';
import { trackFindings } from './track/trackFindings.ts';
import { verdicts } from './verdict/verdicts.ts';

export interface ReduceInput {
  readonly sheet: Sheet;
  readonly program: Result['program'];
  readonly inputs: Result['inputs'];
  /** Mid-exposure time of row 0 of every frame of the footage [s]. */
  readonly timeS: Float64Array;
  readonly tracks: readonly Track[];
  /** The load cell's record where the sheet names one. */
  readonly forceRecord?: ForceRecord | null;
  /** What was noticed on the way here: sheet, footage, clock. */
  readonly findings: readonly Finding[];
}

/** From tracks to the result: clock and scale, motion, key values, theory, verdicts. Pure. */
export function reduce(input: ReduceInput): Result {
  const { sheet, tracks, timeS } = input;
  const settled = settle(sheet);
  const rowTimeS = settled.rowTimeS;

  const gravity = siteGravity(sheet.site);
  const origin = originOf(sheet, tracks);
  const picture = input.inputs.footage;
  const tracksBy = (calibration: Calibration) =>
    tracks.map((track) => worldTrack(track, sheet, timeS, rowTimeS, calibration));
  const fromGravity = needsGravity(sheet)
    ? scaleOfFall(sheet, settled, { origin, picture }, gravity, tracksBy)
    : null;
  const turned =
    sheet.scale.pitchFromFall && !fromGravity
      ? pitchOfFall(sheet, settled, { origin, picture }, gravity, tracksBy)
      : null;
  const calibration = calibrate(
    sheet,
    fromGravity?.settled ?? settled,
    origin,
    picture,
    turned?.pitch ?? undefined,
  );
  // A fall that gives no scale leaves nothing in metres: no track is better than one in unknown units.
  const worldTracks = fromGravity?.found === false ? [] : tracksBy(calibration);

  const frameTimeS = frameTime(timeS, tracks);
  const allNumbers = numbers({
    tracks: worldTracks,
    common: {
      length: fromGravity ? calibration.length.map(asGravity) : calibration.length,
      time: [{ source: 'capture rate', uRel: settled.uCaptureRateRel }],
      uDownRad: calibration.uDownRad,
      frameTimeS,
      exposureS: settled.exposureS,
      metrePerPx: calibration.metrePerPx,
    },
    gravity,
    sheet: { ...sheet, tether: settled.tether },
    forceRecord: input.forceRecord ?? null,
  });
  const derived = fromGravity ? withoutGravityCheck(allNumbers) : allNumbers;
  const decided = verdicts(sheet.limits, derived.keyValues);

  return {
    schema: 'tetherfall/result/1',
    program: input.program,
    inputs: input.inputs,
    frames: resultFrames(sheet, tracks, timeS, rowTimeS),
    motion: derived.motion,
    keyValues: derived.keyValues,
    theory: derived.theory,
    ...(derived.tension ? { tension: derived.tension } : {}),
    ...(derived.loadCell ? { loadCell: derived.loadCell } : {}),
    verdicts: decided.verdicts,
    findings: [
      ...input.findings,
      ...checkSheet(sheet),
      ...settled.findings,
      ...siteFindings(sheet),
      ...(fromGravity ? [fromGravity.finding] : []),
      ...(turned ? [turned.finding] : []),
      ...calibration.findings,
      ...trackFindings(tracks, sheet.bodies),
      ...clockFindings({
        clock: sheet.clock,
        timeS,
        frameTimeS,
        uTimeRel: settled.uCaptureRateRel,
        uSecondClockS: settled.uSecondClockS,
        reference: worldTracks.find((t) => t.role === 'reference'),
        localGMps2: gravity.gMps2,
      }),
      ...derived.findings,
      ...decided.findings,
    ],
  };
}

function needsGravity({ scale }: Sheet): boolean {
  return scale.fromGravity === true && scale.bars.length === 0 && (scale.fiducials?.length ?? 0) < 4;
}

/** What is settled when the ball's fall is the scale bar: it lies in the plane of motion. */
function scaleOfFall(
  sheet: Sheet,
  settled: Settled,
  { origin, picture }: { origin: { x: number; y: number }; picture: PictureSize },
  gravity: LocalGravity,
  tracksBy: (calibration: Calibration) => WorldTrack[],
): { settled: Settled; finding: Finding; found: boolean } {
  const inPlane = { ...settled, planeOffsetM: 0, uPlaneOffsetM: 0 };
  // In pixels the stated distance of the camera says nothing: it is taken as a multiple of the picture's height.
  const inPixels = { ...sheet, scale: { ...sheet.scale, cameraDistanceM: undefined } };
  const byPixels = calibrate(inPixels, { ...inPlane, bars: [pixelBar] }, origin, picture);
  const fallPx = tracksBy(byPixels).find((t) => t.role === 'reference');
  const found = fallPx && fallAsBar(fallPx, byPixels.metrePerPx, sheet, settled, gravity);
  if (found) return { settled: { ...inPlane, bars: [found.bar] }, finding: found.finding, found: true };
  const finding: Finding = {
    level: 'stop',
    code: 'scaleNotFromGravity',
    text: 'scale.fromGravity: the reference body is not seen to fall far enough to give the scale; film a scale bar.',
  };
  return { settled: { ...inPlane, bars: [pixelBar] }, finding, found: false };
}

/** The camera's pitch by the reference body's fall (`scale.pitchFromFall`); without one the assumption stays. */
function pitchOfFall(
  sheet: Sheet,
  settled: Settled,
  { origin, picture }: { origin: { x: number; y: number }; picture: PictureSize },
  gravity: LocalGravity,
  tracksBy: (calibration: Calibration) => WorldTrack[],
): { pitch: Turned | null; finding: Finding } {
  const trackAt = (pitchRad: number) =>
    tracksBy(calibrate(sheet, settled, origin, picture, { pitchRad, uPitchRad: 0 })).find(
      (t) => t.role === 'reference',
    );
  const level = trackAt(0);
  const fall = level && mainFall(level);
  const ball = ballIn(sheet);
  const found =
    level && fall && ball
      ? pitchFromFall({
          afterS: Float64Array.from(fall.used, (i) => level.timeS[i] - fall.restS),
          uYM: Float64Array.from(fall.used, (i) => level.uYM[i]),
          heightsAt: (pitchRad) => {
            const yM = trackAt(pitchRad)?.yM ?? level.yM;
            return Float64Array.from(fall.used, (i) => yM[i]);
          },
          ball,
          air: airOf(sheet.ambient),
          localGMps2: gravity.gMps2,
        })
      : null;
  const degrees = 180 / Math.PI;
  if (!found) {
    const text = `scale.pitchFromFall: the reference body's fall gives no pitch of the camera; ${(settled.turn.uPitchRad * degrees).toPrecision(2)}° either way was assumed. Film more of its fall, or state scale.pitchDeg.`;
    return { pitch: null, finding: { level: 'caution', code: 'pitchNotFromFall', text } };
  }
  const { pitchRad, uPitchRad } = found;
  const text = `The camera looks ${(pitchRad * degrees).toFixed(3)}° ± ${(uPitchRad * degrees).toFixed(3)}° (k = 1) down on the plane of the fall, found from the reference body's fall; its drag was taken as known.`;
  return { pitch: { pitchRad, uPitchRad }, finding: { level: 'note', code: 'pitchFromFall', text } };
}

function siteFindings(sheet: Sheet): Finding[] {
  if (sheet.site !== undefined) return [];
  const text =
    'The site is not stated: theory and gravity check rest on standard gravity, uncertain by 0.02 m/s². State site.gMps2, or site.latitudeDeg and heightM.';
  return [{ level: 'caution', code: 'siteMissing', text }];
}

/** The world's origin: as stated, else where the tip starts, else the first body. */
function originOf(sheet: Sheet, tracks: readonly Track[]): { x: number; y: number } {
  if (sheet.origin) return sheet.origin;
  const tip = sheet.bodies.findIndex((b) => b.role === 'tip');
  const index = Math.max(tip, 0);
  const track = tracks[index];
  const start = track.state.findIndex((s) => s === 'measured' || s === 'manual');
  if (start >= 0) return { x: track.xPx[start], y: track.yPx[start] };
  return sheet.bodies[index];
}

function isData(state: Track['state'][number]): boolean {
  return state === 'measured' || state === 'manual';
}

function worldTrack(
  track: Track,
  sheet: Sheet,
  timeS: Float64Array,
  rowTimeS: number,
  calibration: Calibration,
): WorldTrack {
  const body = sheet.bodies.find((b) => b.id === track.bodyId);
  if (!body) throw new Error(`reduce: a track of "${track.bodyId}", which the sheet does not have`);
  const camera = (i: number) => ({
    xPx: track.camera?.xPx[i] ?? 0,
    yPx: track.camera?.yPx[i] ?? 0,
    uPx: track.camera?.uPx[i] ?? 0,
  });
  // A frame in which the camera's own shift is not known says nothing of where the body is on the rig.
  const used = Array.from(track.frame.keys()).filter(
    (i) => isData(track.state[i]) && !Number.isNaN(camera(i).xPx),
  );
  const onRig = used.map(
    (i): PixelPoint => ({
      space: 'pixel',
      xPx: track.xPx[i] - camera(i).xPx,
      yPx: track.yPx[i] - camera(i).yPx,
    }),
  );
  const points = onRig.map(calibration.toWorld);
  const us = used.map((i, k) =>
    calibration.uWorld(
      onRig[k],
      Math.hypot(track.uXPx[i], camera(i).uPx),
      Math.hypot(track.uYPx[i], camera(i).uPx),
    ),
  );
  return {
    bodyId: body.id,
    role: body.role,
    frame: Int32Array.from(used, (i) => track.frame[i]),
    timeS: Float64Array.from(used, (i) => rowTime(timeS[track.frame[i]], track.yPx[i], rowTimeS)),
    xM: Float64Array.from(points, (p) => p.xM),
    yM: Float64Array.from(points, (p) => p.yM),
    uXM: Float64Array.from(us, (u) => u.uXM),
    uYM: Float64Array.from(us, (u) => u.uYM),
  };
}

/** Median time from frame to frame over the frames that were reduced [s]. */
function frameTime(timeS: Float64Array, tracks: readonly Track[]): number {
  const frames = tracks[0].frame;
  const steps = Array.from({ length: frames.length - 1 }, (_, i) => timeS[frames[i + 1]] - timeS[frames[i]]);
  steps.sort((a, b) => a - b);
  return steps[steps.length >> 1] ?? 0;
}

function resultFrames(
  sheet: Sheet,
  tracks: readonly Track[],
  timeS: Float64Array,
  rowTimeS: number,
): ResultFrame[] {
  const tip = Math.max(
    0,
    sheet.bodies.findIndex((b) => b.role === 'tip'),
  );
  return Array.from(tracks[0].frame, (n, i) => {
    const bodies: Record<string, BodyInFrame> = {};
    for (const track of tracks) bodies[track.bodyId] = bodyInFrame(track, i, timeS[n], rowTimeS);
    const tipRow = Number.isNaN(tracks[tip].yPx[i]) ? 0 : tracks[tip].yPx[i];
    return { n, timeS: rowTime(timeS[n], tipRow, rowTimeS), bodies };
  });
}

function bodyInFrame(track: Track, i: number, frameTimeS: number, rowTimeS: number): BodyInFrame {
  const state = track.state[i];
  if (state === 'lost') return { state };
  const score = track.score[i];
  return {
    x: track.xPx[i],
    y: track.yPx[i],
    ux: track.uXPx[i],
    uy: track.uYPx[i],
    ...(Number.isNaN(score) ? {} : { score }),
    state,
    ...(rowTimeS === 0 ? {} : { timeS: rowTime(frameTimeS, track.yPx[i], rowTimeS) }),
  };
}
