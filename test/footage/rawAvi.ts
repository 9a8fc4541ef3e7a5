import { writeFile } from 'node:fs/promises';

/**
 * Writes uncompressed AVI byte by byte, so that no encoder stands between the test's picture and the file.
 *
 * @param fourcc  coding of the pictures (`YUY2`, `v210`, …); empty for bottom-up BGR (BI_RGB)
 * @param frames  the pictures' bytes as stored
 */
export async function writeRawAvi(
  path: string,
  order: { fourcc: string; bits: number; widthPx: number; heightPx: number; rateHz: number },
  frames: readonly Uint8Array[],
): Promise<void> {
  const { fourcc, bits, widthPx, heightPx, rateHz } = order;
  const frameBytes = frames[0]?.length ?? 0;
  const coding = fourcc === '' ? Buffer.alloc(4) : Buffer.from(fourcc, 'latin1');
  const avih = words(
    Math.round(1e6 / rateHz),
    frameBytes * rateHz,
    0,
    0x10,
    frames.length,
    0,
    1,
    frameBytes,
    widthPx,
    heightPx,
    0,
    0,
    0,
    0,
  );
  const strh = Buffer.concat([
    Buffer.from('vids', 'latin1'),
    coding,
    words(0, 0, 0, 1, rateHz, 0, frames.length, frameBytes, 0xffffffff, 0, 0, 0),
  ]);
  const planesAndBits = Buffer.alloc(4);
  planesAndBits.writeUInt16LE(1, 0);
  planesAndBits.writeUInt16LE(bits, 2);
  const strf = Buffer.concat([
    words(40, widthPx, heightPx),
    planesAndBits,
    coding,
    words(frameBytes, 0, 0, 0, 0),
  ]);
  const hdrl = list('hdrl', chunk('avih', avih), list('strl', chunk('strh', strh), chunk('strf', strf)));
  const movi = list('movi', ...frames.map((bytes) => chunk('00db', bytes)));
  const index = frames.map((_, n) =>
    Buffer.concat([
      Buffer.from('00db', 'latin1'),
      words(0x10, 4 + n * (8 + frameBytes + (frameBytes % 2)), frameBytes),
    ]),
  );
  const body = Buffer.concat([
    Buffer.from('AVI ', 'latin1'),
    hdrl,
    movi,
    chunk('idx1', Buffer.concat(index)),
  ]);
  await writeFile(path, chunk('RIFF', body));
}

function words(...values: number[]): Buffer {
  const bytes = Buffer.alloc(4 * values.length);
  for (const [i, value] of values.entries()) bytes.writeUInt32LE(value, 4 * i);
  return bytes;
}

function chunk(id: string, body: Uint8Array): Buffer {
  return Buffer.concat([Buffer.from(id, 'latin1'), words(body.length), body, Buffer.alloc(body.length % 2)]);
}

function list(type: string, ...parts: Buffer[]): Buffer {
  return chunk('LIST', Buffer.concat([Buffer.from(type, 'latin1'), ...parts]));
}
