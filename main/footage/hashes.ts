import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { basename } from 'node:path';
import type { FootageInput } from './footageInput.ts';

/** A hash of luma as displayed: the first 128 bits of SHA-256 over its values (two bytes each, little-endian, above 8 bits). */
export function lumaHash(luma: Uint8Array | Uint16Array): string {
  const bytes = new Uint8Array(luma.buffer, luma.byteOffset, luma.byteLength);
  return createHash('sha256').update(bytes).digest('hex').slice(0, 32);
}

/** SHA-256 of a file's bytes; of a numbered sequence: of each file's name, a zero byte and its bytes, in order. */
export async function footageSha256(input: FootageInput, signal: AbortSignal): Promise<string> {
  const hash = createHash('sha256');
  const files = input.kind === 'file' ? [input.path] : input.files;
  for (const file of files) {
    if (input.kind === 'stills') hash.update(`${basename(file)}\0`);
    for await (const chunk of createReadStream(file, { signal, highWaterMark: 1 << 20 })) hash.update(chunk);
  }
  return hash.digest('hex');
}
