import { deflateSync } from 'node:zlib';

/** Colour types of PNG (ISO/IEC 15948, table 11.1). */
export const PNG_GREY = 0;
export const PNG_RGB = 2;
export const PNG_PALETTE = 3;

/**
 * A PNG file written byte by byte, so that no encoder stands between the test's picture and the file.
 *
 * @param rows     each row's bytes as stored (big-endian above 8 bits)
 * @param palette  RGB triples for PNG_PALETTE
 */
export function png(
  widthPx: number,
  bitDepth: number,
  colourType: number,
  rows: readonly Uint8Array[],
  palette: Uint8Array = new Uint8Array(0),
): Buffer {
  const head = Buffer.alloc(13);
  head.writeUInt32BE(widthPx, 0);
  head.writeUInt32BE(rows.length, 4);
  head[8] = bitDepth;
  head[9] = colourType;
  const raw = Buffer.concat(rows.flatMap((row) => [Buffer.of(0), Buffer.from(row)]));
  return Buffer.concat([
    Buffer.of(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a),
    chunk('IHDR', head),
    ...(palette.length > 0 ? [chunk('PLTE', palette)] : []),
    chunk('IDAT', deflateSync(raw)),
    chunk('IEND', Buffer.alloc(0)),
  ]);
}

function chunk(type: string, body: Uint8Array): Buffer {
  const head = Buffer.alloc(4);
  head.writeUInt32BE(body.length);
  const named = Buffer.concat([Buffer.from(type, 'latin1'), body]);
  const check = Buffer.alloc(4);
  check.writeUInt32BE(crc32(named));
  return Buffer.concat([head, named, check]);
}

/** ISO/IEC 15948, annex D. */
function crc32(bytes: Uint8Array): number {
  let crc = 0xffffffff;
  for (const byte of bytes) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit++) crc = crc & 1 ? (crc >>> 1) ^ 0xedb88320 : crc >>> 1;
  }
  return (crc ^ 0xffffffff) >>> 0;
}
