import { describe, expect, it } from 'vitest';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import { motionMethods } from '../../analysis/sheet/motionSettings.ts';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import { exampleSheet } from './exampleSheet.ts';

function parsed(motion: unknown) {
  return parseSheet({ ...exampleSheet(), motion });
}

/** The least that each method must be told. */
const least: Record<(typeof motionMethods)[number], object> = {
  adaptive: {},
  localPolynomial: {},
  quinticSpline: {},
  butterworth: {},
  channelClass: { class: 180 },
  centralDifference: { strideFrames: 2 },
};

describe("the sheet's motion section", () => {
  it.each(motionMethods)('takes %s with intervals, heights and bands', (method) => {
    const intervals = [{ fromS: 0.1, toS: 0.2 }];
    const sheet = parsed({ method, ...least[method], intervals, heightsM: [-0.3], simultaneousBands: true });
    expect(sheet).toMatchObject({
      ok: true,
      findings: [],
      sheet: { motion: { method, intervals: [{ body: 'tip', zero: 'release', fromS: 0.1, toS: 0.2 }] } },
    });
  });

  it.each([
    [{}, /^motion\.method: must be "adaptive", "localPolynomial", .*"centralDifference"; it is missing$/],
    [{ method: 'splines' }, /^motion\.method: must be "adaptive", .*, not "splines"$/],
    [3, /^motion: expected object, received number \(it is 3\)$/],
    [{ method: 'channelClass', class: 70 }, /^motion\.class: must be 60, 180, 600 or 1000 \(it is 70\)$/],
    [
      { method: 'localPolynomial', windowFrames: 4 },
      /^motion\.windowFrames: must be an odd number of frames \(it is 4\)$/,
    ],
    [
      { method: 'localPolynomial', windowFrames: 5, degree: 5 },
      /^motion: windowFrames must be greater than degree$/,
    ],
    [{ method: 'butterworth', cutoffHz: -1 }, /^motion\.cutoffHz: must be greater than 0 \(it is -1\)$/],
    [{ method: 'butterworth', cutoffKHz: 1 }, /^motion\.cutoffKHz: .* did you mean cutoffHz\?/],
    [{ method: 'centralDifference' }, /^motion\.strideFrames: is missing; state it$/],
    [
      { method: 'adaptive', intervals: [{ fromS: 2, toS: 1 }] },
      /^motion\.intervals\[0\]: toS must be after fromS$/,
    ],
  ])('says in one line what is wrong with %j', (motion, line) => {
    const sheet = parsed(motion);
    if (sheet.ok) throw new Error('a bad section was taken');
    expect(sheet.problems).toHaveLength(1);
    expect(sheet.problems[0]).toMatch(line);
  });

  it('is refused before any footage is read where the capture rate is too low for the class', () => {
    const sheet = parsed({ method: 'channelClass', class: 600 });
    if (!sheet.ok) throw new Error(sheet.problems.join());
    const stops = checkSheet(sheet.sheet).filter((f) => f.level === 'stop');
    expect(stops.map((f) => f.text)).toEqual([
      'motion: class 600 of SAE J211-1 needs at least 6000 frames per second, and the footage has 1000; class 60 would do.',
    ]);
  });

  it('says that a setting of another method was not used', () => {
    expect(parsed({ method: 'quinticSpline', cutoffHz: 10 })).toMatchObject({
      ok: true,
      findings: [{ code: 'fieldNotKnown', text: expect.stringContaining('motion.cutoffHz') }],
    });
  });
});
