import type { Sheet } from '../../analysis/sheet/sheet.ts';
import type { Draft, DraftBody } from './draft.ts';

/**
 * The sheet's JSON as far as it is stated: for parseSheet, which says what is missing. Parts in which nothing is stated are
 * left out; a body that was never placed and is not needed is left out too.
 */
export function sheetJson(draft: Draft): Record<string, unknown> {
  const { clock, site, scale } = draft;
  return {
    schema: 'tetherfall/sheet/1',
    footage: draft.footage,
    clock:
      clock.kind === 'captureRate'
        ? {
            kind: clock.kind,
            captureRateHz: clock.captureRateHz,
            ...optional('uCaptureRateRel', clock.uCaptureRateRel),
          }
        : clock.kind === 'timestamps'
          ? { kind: clock.kind, path: clock.path }
          : { kind: clock.kind },
    ...part('camera', draft.camera),
    scale: {
      bars: scale.bars.filter(isStated),
      ...part('plumb', scale.plumb),
      ...optional('fiducials', scale.fiducials),
      ...optional('planeOffsetM', scale.planeOffsetM),
      ...optional('uPlaneOffsetM', scale.uPlaneOffsetM),
      ...optional('cameraDistanceM', scale.cameraDistanceM),
      ...optional('pitchDeg', scale.pitchDeg),
      ...optional('uPitchDeg', scale.uPitchDeg),
      ...optional('yawDeg', scale.yawDeg),
      ...optional('uYawDeg', scale.uYawDeg),
      ...optional('pitchFromFall', scale.pitchFromFall),
      ...optional('fromGravity', scale.fromGravity),
    },
    ...optional('origin', draft.origin),
    ...part(
      'site',
      draft.siteBy === 'gravity'
        ? { ...optional('gMps2', site.gMps2), ...optional('uGMps2', site.uGMps2) }
        : { ...optional('latitudeDeg', site.latitudeDeg), ...optional('heightM', site.heightM) },
    ),
    ...part('ambient', draft.ambient),
    bodies: draft.bodies.filter(isPlaced),
    ...part('tether', draft.tether),
    ...optional('motion', draft.motion),
    limits: draft.limits,
  };
}

/** A draft of a whole sheet: the way back. */
export function draftOf(sheet: Sheet): Draft {
  const { clock, site } = sheet;
  const byPlace = site !== undefined && 'latitudeDeg' in site;
  return {
    footage: sheet.footage,
    clock,
    camera: sheet.camera ?? {},
    scale: {
      ...sheet.scale,
      bars: sheet.scale.bars.length > 0 || sheet.scale.fiducials ? sheet.scale.bars : [{}],
      plumb: sheet.scale.plumb ?? {},
    },
    ...optional('origin', sheet.origin),
    siteBy: byPlace ? 'place' : 'gravity',
    site: site ?? {},
    ambient: sheet.ambient ?? {},
    bodies: sheet.bodies,
    tether: sheet.tether ?? {},
    ...optional('motion', sheet.motion),
    limits: sheet.limits,
  };
}

export function isPlaced(body: DraftBody): boolean {
  return body.x !== undefined && body.y !== undefined;
}

function isStated(value: object): boolean {
  return Object.values(value).some((v) => v !== undefined);
}

function part(name: string, value: object): Record<string, unknown> {
  return isStated(value) ? { [name]: value } : {};
}

function optional(name: string, value: unknown): Record<string, unknown> {
  return value === undefined ? {} : { [name]: value };
}
