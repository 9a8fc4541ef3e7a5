import { randomBytes } from 'node:crypto';
import { mkdir, readFile, writeFile } from 'node:fs/promises';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import { encode } from '../../fixtures/encode.ts';
import type { FootageBackend } from '../../main/footage/frameSource.ts';
import { openFootage } from '../../main/footage/openFootage.ts';
import { Refusal } from '../../main/refusal.ts';
import { backendsHere } from './backendsHere.ts';
import { childrenAlive } from './childrenAlive.ts';
import { pattern, patterns } from './pattern.ts';
import { writeRawAvi } from './rawAvi.ts';
import { temporaryFolder } from './temporaryFolder.ts';

const folder = temporaryFolder();
const raw = { fourcc: 'Y800', bits: 8, widthPx: 48, heightPx: 32, rateHz: 100 };

interface Bad {
  readonly name: string;
  readonly code: string;
  readonly says: RegExp;
  make(): Promise<string>;
}

const bad: readonly Bad[] = [
  {
    name: 'no such file',
    code: 'footageNotFound',
    says: /nowhere\.mp4: there is no such file/,
    make: async () => folder.in('nowhere.mp4'),
  },
  {
    name: 'a pattern that fits nothing',
    code: 'footageNotFound',
    says: /no file fits this pattern/,
    make: async () => folder.in('nothing_%04d.png'),
  },
  {
    name: 'a folder without stills',
    code: 'footageNotFound',
    says: /holds no numbered PNG or TIFF stills/,
    async make() {
      await mkdir(folder.in('bare'));
      return folder.in('bare');
    },
  },
  {
    name: 'an empty file',
    code: 'footageEmpty',
    says: /empty\.mp4: the file is empty/,
    make: () => written('empty.mp4', new Uint8Array(0)),
  },
  {
    name: 'a text',
    code: 'footageNotVideo',
    says: /notes\.txt: is not a video/,
    make: () => written('notes.txt', Buffer.from('rig 2, third drop\n'.repeat(50))),
  },
  {
    name: 'random bytes',
    code: 'footageNotVideo',
    says: /random\.mp4: is not a video/,
    make: () => written('random.mp4', randomBytes(20_000)),
  },
  {
    name: 'a playlist that points elsewhere',
    code: 'footageNotVideo',
    says: /list\.mkv: is not a video/,
    make: () => written('list.mkv', Buffer.from("ffconcat version 1.0\nfile 'other.mp4'\n")),
  },
  {
    name: 'an MP4 without its end',
    code: 'footageNotVideo',
    says: /its end is missing/,
    async make() {
      const whole = folder.in('whole.mp4');
      await encode(patterns(20, 96, 64), whole, { kind: 'h264', crf: 20 }, { playRateHz: 250 });
      const bytes = await readFile(whole);
      return await written('cut.mp4', bytes.subarray(0, bytes.length - 300)); // the list of frames comes last
    },
  },
  {
    name: 'sound without video',
    code: 'footageNotVideo',
    says: /holds sound or data but no video/,
    async make() {
      await writeRawAvi(folder.in('video.avi'), raw, [pattern(0, 48, 32).luma as Uint8Array]);
      const bytes = await readFile(folder.in('video.avi'));
      bytes.write('auds', bytes.indexOf('vids'), 'latin1');
      return await written('sound.avi', bytes);
    },
  },
  {
    name: 'a video without frames',
    code: 'footageWithoutFrames',
    says: /no frame of it can be decoded/,
    async make() {
      await writeRawAvi(folder.in('none.avi'), raw, []);
      return folder.in('none.avi');
    },
  },
  {
    name: 'a pixel format without a stated luma',
    code: 'footagePixelFormat',
    says: /pixel format rgb555le has no stated luma/,
    async make() {
      const order = { ...raw, fourcc: '', bits: 16 };
      await writeRawAvi(folder.in('rgb555.avi'), order, [new Uint8Array(2 * 48 * 32)]);
      return folder.in('rgb555.avi');
    },
  },
];

async function written(name: string, bytes: Uint8Array): Promise<string> {
  await writeFile(folder.in(name), bytes);
  return folder.in(name);
}

async function refusalOf(work: () => Promise<unknown>): Promise<Refusal> {
  const error = await work().then(
    () => new Error('nothing was refused'),
    (reason: unknown) => reason,
  );
  if (error instanceof Refusal) return error;
  throw error;
}

describe('footage that cannot be read', () => {
  let backends: FootageBackend[] = [];
  beforeAll(async () => {
    backends = await backendsHere();
  });

  it.each(bad)('$name: one line that says what, where and what to do, with every backend', async (wrong) => {
    const path = await wrong.make();
    for (const backend of backends) {
      const refusal = await refusalOf(async () => {
        const source = await backend.open(path);
        await source.index().finally(() => source.close());
      });
      expect(refusal.code, backend.name).toBe(wrong.code);
      expect(refusal.status).toBe(3);
      expect(refusal.message).toMatch(wrong.says);
      expect(refusal.message).not.toMatch(/\n/);
      expect(childrenAlive(), backend.name).toBe(0);
    }
  });
});

describe('openFootage', () => {
  it('refuses a program set by the user that does not work, and takes no other', async () => {
    const path = await written('any.mp4', Buffer.from('any'));
    const refusal = await refusalOf(() => openFootage(path, { ffmpegPath: folder.in('no-such-program') }));
    expect(refusal).toMatchObject({ code: 'decoderUnusable', status: 3 });
    expect(refusal.message).toMatch(/no-such-program\): is no ffmpeg program of version 4\.2 or newer/);
  });

  it('takes the program that the environment names', async () => {
    vi.stubEnv('TETHERFALL_FFMPEG', folder.in('from-environment'));
    try {
      expect((await refusalOf(() => openFootage('any.mp4'))).message).toMatch(/from-environment/);
    } finally {
      vi.unstubAllEnvs();
    }
  });

  it('names the remedies where there is no decoder', async () => {
    vi.resetModules();
    vi.doMock('../../main/footage/backends/all.ts', () => ({ backends: [] }));
    const bare = await import('../../main/footage/openFootage.ts');
    vi.doUnmock('../../main/footage/backends/all.ts');
    await expect(bare.openFootage('any.mp4')).rejects.toMatchObject({
      code: 'noDecoder',
      status: 3,
      message: expect.stringMatching(/install ffmpeg.*TETHERFALL_FFMPEG.*ffmpeg-static or node-av/),
    });
  });
});
