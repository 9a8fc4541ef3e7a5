import { describe, expect, it } from 'vitest';
import { progressBarText, progressText } from '../../main/cli/progressText.ts';
import { progressBar, progressFor, progressLines } from '../../main/cli/showProgress.ts';
import type { Progress } from '../../main/jobs/progress.ts';

const half: Progress = { phase: 'track', framesDone: 206, framesTotal: 412, rateHz: 95.4, timeLeftS: 2.2 };

function output(isTTY: boolean, columns?: number) {
  const written: string[] = [];
  return { written, isTTY, columns, write: (text: string) => written.push(text) };
}

describe('progress in words', () => {
  it.each<[Partial<Progress>, string]>([
    [{}, 'Following bodies: 206 of 412 frames, 95 frames/s, 3 s left'],
    [{ framesTotal: null, timeLeftS: null }, 'Following bodies: 206 frames, 95 frames/s'],
    [
      { phase: 'index', rateHz: 2.34, timeLeftS: 88 },
      'Reading footage: 206 of 412 frames, 2.3 frames/s, 1 min 28 s left',
    ],
    [{ timeLeftS: 59.7 }, 'Following bodies: 206 of 412 frames, 95 frames/s, 1 min 00 s left'],
    [{ framesDone: 2 }, 'Following bodies: 2 of 412 frames'],
    [{ phase: 'motion', rateHz: 0, timeLeftS: null }, 'Working out motion: 206 of 412 frames'],
  ])('%j', (changes, text) => {
    expect(progressText({ ...half, ...changes })).toBe(text);
  });
});

describe('the progress bar', () => {
  it('is half full at half of the frames', () => {
    expect(progressBarText(half, 100)).toBe(
      `Following bodies    [${'#'.repeat(15)}${'-'.repeat(15)}]  206 of 412 frames, 95 frames/s, 3 s left`,
    );
  });

  it.each([20, 40, 60, 79, 200])('fits into %i columns', (width) => {
    for (const framesDone of [0, 1, 206, 412, 500]) {
      expect(progressBarText({ ...half, framesDone }, width).length).toBeLessThanOrEqual(width);
    }
  });

  it.each([undefined, 0])('is drawn for 80 columns on a terminal that says its width is %s', (columns) => {
    const terminal = output(true, columns);
    progressBar(terminal).show(half);
    expect(terminal.written).toEqual([`\r\u001b[K${progressBarText(half, 79)}`]);
    expect(progressBarText(half, 79)).toMatch(/\[#+-+\] .* 3 s left$/);
  });

  it('is redrawn in one line and taken away at the end', () => {
    const terminal = output(true, 90);
    const bar = progressBar(terminal);
    bar.show(half);
    bar.show({ ...half, framesDone: 412 });
    bar.end();
    bar.end();
    expect(terminal.written).toHaveLength(3);
    for (const text of terminal.written) {
      expect(text.startsWith('\r\u001b[K')).toBe(true);
      expect(text).not.toContain('\n');
    }
    expect(terminal.written.at(-1)).toBe('\r\u001b[K');
  });
});

describe('progress away from a terminal', () => {
  it('is one line per second, and none for a short job', () => {
    let nowMs = 5000;
    const file = output(false);
    const lines = progressLines(file, () => nowMs);
    for (let i = 0; i < 35; i++) {
      lines.show(half);
      nowMs += 100;
    }
    lines.end();
    expect(file.written).toEqual(Array(3).fill(`${progressText(half)}\n`));
  });

  it.each([
    ['a terminal', true, {}, '\r'],
    ['a terminal that cannot redraw a line', true, { TERM: 'dumb' }, ''],
    ['a file', false, {}, ''],
  ])('is chosen by what %s can show', (_, isTTY, env, start) => {
    const out = output(isTTY, 80);
    progressFor(out, env).show(half);
    expect((out.written[0] ?? '').slice(0, 1)).toBe(start);
  });
});
