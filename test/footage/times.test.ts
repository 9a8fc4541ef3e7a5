import { describe, expect, it } from 'vitest';
import type { FootageForm, Playing } from '../../fixtures/encode/form.ts';
import { encode } from '../../fixtures/encode.ts';
import type { FootageIndex } from '../../main/footage/frameSource.ts';
import { checkTimes } from '../../main/footage/timestamps.ts';
import { backendsHere } from './backendsHere.ts';
import { lumaDigest } from './lumaDigest.ts';
import { pattern, patterns } from './pattern.ts';
import { temporaryFolder } from './temporaryFolder.ts';

const folder = temporaryFolder();

async function indexes(file: string, form: FootageForm, playing: Playing): Promise<FootageIndex[]> {
  await encode(patterns(20, 96, 64), folder.in(file), form, playing);
  const found: FootageIndex[] = [];
  for (const backend of await backendsHere()) {
    const source = await backend.open(folder.in(file));
    found.push(await source.index());
    await source.close();
  }
  return found;
}

const codes = ({ findings }: { findings: FootageIndex['findings'] }) => findings.map(({ code }) => code);

describe('times of the file', () => {
  it('are kept as they are where the rate varies', async () => {
    // a gap after frame 7 and a hurried pair at 12, in the 1/90 000 s of the file
    const frameTimesS = Array.from(
      { length: 20 },
      (_, n) => (n + (n > 7 ? 3 : 0) - (n === 12 ? 0.5 : 0)) / 250,
    );
    const found = await indexes(
      'varies.mp4',
      { kind: 'h264', crf: 20, bFrames: 2 },
      { playRateHz: 250, frameTimesS },
    );
    for (const index of found) {
      const timesS = index.pts.map((t) => ((t ?? Number.NaN) * index.timeBase.num) / index.timeBase.den);
      for (const [n, t] of frameTimesS.entries()) expect(timesS[n]).toBeCloseTo(t, 5); // half a tick is 5.6e-6 s
      expect(codes(index)).toEqual([]);
    }
  });

  it('are missing in AVI with B-frames, where decoders only guess', async () => {
    for (const index of await indexes('b.avi', { kind: 'h264', crf: 20, bFrames: 2 }, { playRateHz: 250 })) {
      expect(new Set(index.pts)).toEqual(new Set([null]));
      expect(codes(index)).toEqual(['timestampsMissing']);
    }
  });

  it('are called coarse in Matroska above 500 frames/s, and not below', async () => {
    for (const index of await indexes('fast.mkv', { kind: 'ffv1' }, { playRateHz: 800 })) {
      expect(codes(index)).toEqual(['timestampsCoarse']);
    }
    for (const index of await indexes('slow.mkv', { kind: 'ffv1' }, { playRateHz: 250 })) {
      expect(codes(index)).toEqual([]);
    }
  });

  it('are called contradictory where one is not after the one before, and left as they are', () => {
    const raw = {
      name: 'c.mp4',
      kind: 'file',
      container: 'mp4',
      timeBase: { num: 1, den: 1000 },
      reordered: false,
    } as const;
    const checked = checkTimes({ ...raw, pts: [0, 4, 4, 8] });
    expect(checked.pts).toEqual([0, 4, 4, 8]);
    expect(checked.findings).toEqual([
      {
        level: 'caution',
        code: 'timestampsContradict',
        text: expect.stringMatching(/time of frame 2 is not after/),
      },
    ]);
    expect(codes(checkTimes({ ...raw, pts: [0, null, 8] }))).toEqual(['timestampsMissing']);
  });
});

describe('rotation', () => {
  it.each([90, 180, 270] as const)(
    'by %i degrees is applied: frames are as displayed',
    async (rotationDeg) => {
      const shown = patterns(6, 96, 64);
      const path = folder.in(`turned-${rotationDeg}.mp4`);
      await encode(shown, path, { kind: 'h264', crf: 0 }, { playRateHz: 250, rotationDeg });
      for (const backend of await backendsHere()) {
        const source = await backend.open(path);
        const index = await source.index();
        expect(index).toMatchObject({ widthPx: 96, heightPx: 64, rotationDeg });
        expect(lumaDigest(await source.frame(5)), backend.name).toBe(lumaDigest(pattern(5, 96, 64)));
        await source.close();
      }
    },
  );
});
