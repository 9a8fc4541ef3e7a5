import { readFile, writeFile } from 'node:fs/promises';
import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import type { FootageForm } from '../../fixtures/encode/form.ts';
import { encode } from '../../fixtures/encode.ts';
import type { FootageBackend, FootageIndex } from '../../main/footage/frameSource.ts';
import { Refusal } from '../../main/refusal.ts';
import { backendsHere } from './backendsHere.ts';
import { listFirst } from './listFirst.ts';
import { lumaDigest } from './lumaDigest.ts';
import { patterns } from './pattern.ts';
import { temporaryFolder } from './temporaryFolder.ts';

const folder = temporaryFolder();
const COUNT = 40;
const whole = patterns(COUNT, 96, 64);
let backends: FootageBackend[] = [];
beforeAll(async () => {
  backends = await backendsHere();
});

async function read(backend: FootageBackend, path: string) {
  const source = await backend.open(path);
  try {
    const seen: string[] = [];
    const index = await source.index({ onFrame: ({ picture }) => seen.push(lumaDigest(picture)) });
    const again: string[] = [];
    for await (const { picture } of source.frames(0, Number.POSITIVE_INFINITY))
      again.push(lumaDigest(picture));
    expect(again, 'frames() hands on what index() trusts').toEqual(seen.slice(0, index.frameCount));
    return { index, trusted: seen.slice(0, index.frameCount) };
  } finally {
    await source.close();
  }
}

function damageOf(index: FootageIndex): string | undefined {
  return index.findings.find((finding) => finding.code === 'footageDamaged')?.text;
}

interface Damage {
  readonly name: string;
  readonly file: string;
  readonly form: FootageForm;
  readonly damage: (bytes: Buffer) => Buffer;
}

const cutTo = (part: number) => (bytes: Buffer) => bytes.subarray(0, Math.round(bytes.length * part));
const spoilFrom = (part: number) => (bytes: Buffer) => {
  const spoilt = Buffer.from(bytes);
  for (let i = 0; i < 40; i++) spoilt[Math.round(bytes.length * part) + 7 * i] = (i * 91) & 0xff;
  return spoilt;
};

const damages: readonly Damage[] = [
  {
    name: 'a cut MP4 with its list of frames in front',
    file: 'cut.mp4',
    form: { kind: 'h264', crf: 0, bFrames: 2 },
    damage: (b) => cutTo(0.6)(listFirst(b)),
  },
  { name: 'a cut Matroska file', file: 'cut.mkv', form: { kind: 'ffv1' }, damage: cutTo(0.6) },
  { name: 'a cut AVI file', file: 'cut.avi', form: { kind: 'rawGrey' }, damage: cutTo(0.6) },
  {
    name: 'an MP4 with wrong bytes',
    file: 'spoilt.mp4',
    form: { kind: 'h264', crf: 0, bFrames: 2 },
    damage: spoilFrom(0.5),
  },
  { name: 'FFV1 with wrong bytes', file: 'spoilt.mkv', form: { kind: 'ffv1' }, damage: spoilFrom(0.5) },
];

describe('damaged footage', () => {
  it.each(damages)(
    '$name gives the frames before the damage, exactly, and a finding with the count',
    async (d) => {
      const path = folder.in(d.file);
      await encode(whole, path, d.form, { playRateHz: 250 });
      await writeFile(path, d.damage(await readFile(path)));
      const counts = new Set<number>();
      for (const backend of backends) {
        const { index, trusted } = await read(backend, path);
        expect(index.frameCount, backend.name).toBeLessThan(COUNT);
        expect(index.frameCount, backend.name).toBeGreaterThan(COUNT / 4);
        expect(trusted, backend.name).toEqual(whole.slice(0, index.frameCount).map(lumaDigest));
        expect(index.pts).toHaveLength(index.frameCount);
        expect(index.frameHashes).toHaveLength(index.frameCount);
        expect(damageOf(index)).toMatch(
          new RegExp(`damaged .*: ${index.frameCount} of \\d+ .*frames can be trusted`),
        );
        counts.add(index.frameCount);
      }
      expect(counts.size, [...counts].join(' and ')).toBe(1);
    },
  );

  it('finds wrong bytes in MJPEG, whose decoder often says nothing', async () => {
    const path = folder.in('spoilt.avi');
    await encode(whole, path, { kind: 'mjpeg', quality: 3 }, { playRateHz: 250 });
    const intact = await read(backends[0] as FootageBackend, path);
    await writeFile(path, spoilFrom(0.5)(await readFile(path)));
    for (const backend of backends) {
      const { index, trusted } = await read(backend, path);
      expect(damageOf(index), backend.name).toBeDefined();
      expect(trusted).toEqual(intact.trusted.slice(0, index.frameCount));
    }
  });

  it('says how many bytes are missing', async () => {
    const path = folder.in('short.avi');
    await encode(whole, path, { kind: 'rawGrey' }, { playRateHz: 250 });
    const bytes = await readFile(path);
    await writeFile(path, bytes.subarray(0, bytes.length - 20_000));
    const { index } = await read(backends[0] as FootageBackend, path);
    expect(damageOf(index)).toMatch(/the file ends 20000 bytes early/);
  });

  it('never trusts a changed frame where the coding carries check sums (any bytes of FFV1 changed)', async () => {
    const path = folder.in('any.mkv');
    await encode(whole.slice(0, 8), path, { kind: 'ffv1' }, { playRateHz: 250 });
    const bytes = await readFile(path);
    const place = fc.double({ min: 0.3, max: 0.95, noNaN: true });
    await fc.assert(
      fc.asyncProperty(fc.array(place, { minLength: 1, maxLength: 5 }), async (places) => {
        const spoilt = Buffer.from(bytes);
        for (const part of places) {
          const at = Math.floor(part * bytes.length);
          spoilt[at] = (spoilt[at] ?? 0) ^ 0x5a;
        }
        await writeFile(path, spoilt);
        const got = await read(backends[0] as FootageBackend, path).catch((error: unknown) => {
          if (error instanceof Refusal) return null;
          throw error;
        });
        if (got === null) return;
        expect(got.trusted).toEqual(whole.slice(0, got.index.frameCount).map(lumaDigest));
      }),
      { numRuns: 6, seed: 11 },
    );
  });
});
