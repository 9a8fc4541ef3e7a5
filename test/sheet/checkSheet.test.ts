import { describe, expect, it } from 'vitest';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import { type SheetInput, sheetSchema } from '../../analysis/sheet/sheet.ts';
import { exampleSheet } from './exampleSheet.ts';

function codesOf(change: (sheet: SheetInput) => void): string[] {
  const sheet = exampleSheet();
  change(sheet);
  return checkSheet(sheetSchema.parse(sheet)).map((f) => `${f.level} ${f.code}`);
}

describe('checkSheet', () => {
  it('finds nothing in a consistent sheet', () => {
    expect(codesOf(() => {})).toEqual([]);
  });

  it.each<[string, (s: SheetInput) => void, string]>([
    [
      'frames in the wrong order',
      (s) => Object.assign(s.footage, { firstFrame: 50, lastFrame: 20 }),
      'stop framesReversed',
    ],
    [
      'an exposure longer than a frame',
      (s) => Object.assign(s.camera ?? {}, { exposureS: 0.002 }),
      'stop exposureTooLong',
    ],
    ['no scale at all', (s) => Object.assign(s.scale, { bars: [] }), 'stop scaleMissing'],
    [
      'both marks of a bar at one place',
      (s) => Object.assign(s.scale.bars?.[0] ?? {}, { b: { x: 60.2, y: 40 } }),
      'stop barTooShort',
    ],
    ['a body id used twice', (s) => Object.assign(s.bodies[1], { id: 'tip' }), 'stop bodyTwice'],
    ['two tips', (s) => Object.assign(s.bodies[1], { role: 'tip' }), 'stop roleTwice'],
    [
      'a body placed outside the frames',
      (s) => Object.assign(s.bodies[1], { frame: 500 }),
      'stop bodyOutsideFrames',
    ],
    [
      'a separation longer than the tether',
      (s) => Object.assign(s.tether ?? {}, { separationM: 1 }),
      'stop separationTooLong',
    ],
    [
      'a very short bar',
      (s) => Object.assign(s.scale.bars?.[0] ?? {}, { b: { x: 60, y: 70 } }),
      'caution barShort',
    ],
    [
      'an uncertainty of zero',
      (s) => Object.assign(s.scale.bars?.[0] ?? {}, { uLengthM: 0 }),
      'caution uncertaintyZero',
    ],
    [
      'an uncertainty of zero of the clock',
      (s) => Object.assign(s.clock, { uCaptureRateRel: 0 }),
      'caution uncertaintyZero',
    ],
  ])('names %s', (_name, change, expected) => {
    expect(codesOf(change)).toContain(expected);
  });
});
