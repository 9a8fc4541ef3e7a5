import { beforeAll, describe, expect, it } from 'vitest';
import type { FootageBackend, FootageIndex } from '../../main/footage/frameSource.ts';
import { backendsHere, setByUserHere } from './backendsHere.ts';
import { formats } from './formats.ts';
import { lumaDigest } from './lumaDigest.ts';
import { temporaryFolder } from './temporaryFolder.ts';

const folder = temporaryFolder();
let backends: FootageBackend[] = [];
beforeAll(async () => {
  backends = [...(await backendsHere()), ...setByUserHere()];
});

/** What must not depend on who decodes. */
function comparable(index: FootageIndex) {
  const { codec: _codec, pixelFormat: _pixelFormat, ...same } = index;
  return same;
}

describe.each(formats)('$name', (format) => {
  it('gives the same frames, times and hashes with every backend, and the luma that was written', async () => {
    const path = folder.in(format.file);
    const truth = await format.make(path);
    const indexes: FootageIndex[] = [];
    for (const backend of backends) {
      const source = await backend.open(path);
      try {
        const seen: string[] = [];
        const index = await source.index({ onFrame: ({ picture }) => seen.push(lumaDigest(picture)) });
        if (truth !== null) expect(seen, backend.name).toEqual(truth.map(lumaDigest));
        expect(seen, backend.name).toHaveLength(format.frameCount);
        expect(source.backend.name).toBe(backend.name);
        indexes.push(index);
      } finally {
        await source.close();
      }
    }
    const [first] = indexes;
    for (const index of indexes) expect(comparable(index)).toEqual(comparable(first as FootageIndex));
    expect(first).toMatchObject({
      frameCount: format.frameCount,
      lumaRule: format.lumaRule,
      bitDepth: format.bitDepth,
      rotationDeg: 0,
    });
    const times = first?.pts.map((t) => (t === null ? null : (t * first.timeBase.num) / first.timeBase.den));
    const expected = Array.from({ length: format.frameCount }, (_, n) =>
      format.intervalS === null ? null : n * format.intervalS,
    );
    // whole ticks of the file's own time base: equal but for the last bit of the division
    for (const [n, t] of expected.entries()) {
      if (t === null) expect(times?.[n]).toBeNull();
      else expect(times?.[n]).toBeCloseTo(t, 12);
    }
  });
});
