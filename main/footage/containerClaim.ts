import { type FileHandle, open } from 'node:fs/promises';

/** What a container's own headers claim, read without any decoder: the measure against which silent damage shows. */
export interface ContainerClaim {
  readonly container: 'mp4' | 'avi' | 'matroska' | 'other';
  /** Frames of the first video track, where the container lists them. */
  readonly frames: number | null;
  /** By how many bytes the file is shorter than its headers say. */
  readonly missingBytes: number;
}

/** Headers larger than this are not read whole: the claim is then left out. */
const LARGEST_HEADER = 256 << 20;

/** Reads the claims of MP4/MOV (ISO/IEC 14496-12), AVI (RIFF) and Matroska (RFC 9559) files. */
export async function containerClaim(path: string): Promise<ContainerClaim> {
  const file = await open(path, 'r');
  try {
    const { size } = await file.stat();
    const head = await bytesAt(file, 0, 12);
    if (head.toString('latin1', 0, 4) === 'RIFF' && head.toString('latin1', 8, 11) === 'AVI') {
      return await aviClaim(file, size);
    }
    if (head.length >= 4 && head.readUInt32BE(0) === 0x1a45dfa3) return await matroskaClaim(file, size);
    if (/^(?:ftyp|moov|mdat|free|wide|skip)$/.test(head.toString('latin1', 4, 8)))
      return await mp4Claim(file, size);
    return { container: 'other', frames: null, missingBytes: 0 };
  } finally {
    await file.close();
  }
}

async function bytesAt(file: FileHandle, position: number, length: number): Promise<Buffer> {
  const bytes = Buffer.alloc(length);
  const { bytesRead } = await file.read(bytes, 0, length, position);
  return bytes.subarray(0, bytesRead);
}

async function mp4Claim(file: FileHandle, size: number): Promise<ContainerClaim> {
  let frames: number | null = null;
  let missingBytes = 0;
  for (let at = 0; at < size; ) {
    const head = await bytesAt(file, at, 16);
    const box = boxHead(head, 0, size - at);
    if (box === null) break;
    if (box.type === 'moov' && box.bytes <= LARGEST_HEADER) {
      frames = mp4Frames(await bytesAt(file, at, box.bytes));
    }
    at += box.bytes;
    missingBytes = Math.max(0, at - size);
  }
  return { container: 'mp4', frames, missingBytes };
}

/** Type, header length and whole length of the box at a place; null where no box can be. */
function boxHead(
  bytes: Buffer,
  at: number,
  toEnd: number,
): { type: string; headBytes: number; bytes: number } | null {
  if (at + 8 > bytes.length) return null;
  const short = bytes.readUInt32BE(at);
  const type = bytes.toString('latin1', at + 4, at + 8);
  if (short === 0) return { type, headBytes: 8, bytes: toEnd };
  if (short !== 1) return short < 8 ? null : { type, headBytes: 8, bytes: short };
  if (at + 16 > bytes.length) return null;
  const long = Number(bytes.readBigUInt64BE(at + 8));
  return long < 16 ? null : { type, headBytes: 16, bytes: long };
}

function children(parent: Buffer): { type: string; body: Buffer }[] {
  const found: { type: string; body: Buffer }[] = [];
  for (let at = 0; at < parent.length; ) {
    const box = boxHead(parent, at, parent.length - at);
    if (box === null) break;
    found.push({ type: box.type, body: parent.subarray(at + box.headBytes, at + box.bytes) });
    at += box.bytes;
  }
  return found;
}

function descend(parent: Buffer, path: readonly string[]): Buffer | null {
  let body: Buffer | null = parent;
  for (const type of path) body = (body && children(body).find((box) => box.type === type)?.body) ?? null;
  return body;
}

/** Sample count (stsz) of the first track whose handler is video. */
function mp4Frames(moov: Buffer): number | null {
  const body = children(moov)[0]?.body ?? moov;
  for (const track of children(body).filter((box) => box.type === 'trak')) {
    const handler = descend(track.body, ['mdia', 'hdlr']);
    if (handler?.toString('latin1', 8, 12) !== 'vide') continue;
    const sizes = descend(track.body, ['mdia', 'minf', 'stbl', 'stsz']);
    const count = sizes !== null && sizes.length >= 12 ? sizes.readUInt32BE(8) : 0;
    return count > 0 ? count : null; // 0: fragmented, the fragments list their own
  }
  return null;
}

async function aviClaim(file: FileHandle, size: number): Promise<ContainerClaim> {
  const head = await bytesAt(file, 0, 65_536);
  let missingBytes = 0;
  for (let at = 0; at + 8 <= size; ) {
    const chunk = await bytesAt(file, at, 8);
    if (chunk.toString('latin1', 0, 4) !== 'RIFF') break;
    at += 8 + chunk.readUInt32LE(4);
    missingBytes = Math.max(0, at - size);
    at += at % 2;
  }
  for (let at = head.indexOf('strh'); at >= 0; at = head.indexOf('strh', at + 4)) {
    if (head.toString('latin1', at + 8, at + 12) !== 'vids' || at + 44 > head.length) continue;
    const frames = head.readUInt32LE(at + 40);
    return { container: 'avi', frames: frames > 0 ? frames : null, missingBytes };
  }
  return { container: 'avi', frames: null, missingBytes };
}

async function matroskaClaim(file: FileHandle, size: number): Promise<ContainerClaim> {
  const head = await bytesAt(file, 0, 4096);
  const ebml = vint(head, 4);
  const segment = ebml === null || ebml.value === null ? -1 : 4 + ebml.bytes + ebml.value;
  const known = segment >= 0 && segment + 12 <= head.length && head.readUInt32BE(segment) === 0x18538067;
  const length = known ? vint(head, segment + 4) : null;
  const end = length?.value == null ? size : segment + 4 + length.bytes + length.value;
  return { container: 'matroska', frames: null, missingBytes: Math.max(0, end - size) };
}

/** An EBML length (RFC 8794): its value, null where it is the reserved "unknown". */
function vint(bytes: Buffer, at: number): { value: number | null; bytes: number } | null {
  const first = bytes[at] ?? 0;
  const length = Math.clz32(first) - 23;
  if (first === 0 || at + length > bytes.length) return null;
  let value = BigInt(first & ((1 << (8 - length)) - 1));
  for (let i = 1; i < length; i++) value = (value << 8n) | BigInt(bytes[at + i] ?? 0);
  const unknown = (1n << BigInt(7 * length)) - 1n;
  return { value: value === unknown ? null : Number(value), bytes: length };
}
