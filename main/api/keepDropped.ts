import { createHash, randomUUID } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdir, mkdtemp, rename, rm, stat, statfs } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Refusal } from '../refusal.ts';
import { safeFileName } from './fileNames.ts';

/** Left free on the disk, so that the log and the system go on working. */
const reserveBytes = 256 * 1024 * 1024;

export interface DroppedFile {
  readonly name: string;
  /** What the sender says the size is; null when it says nothing. */
  readonly sizeBytes: number | null;
  readonly bytes: AsyncIterable<Uint8Array>;
}

/**
 * Copies a dropped file to disk as it comes, under a folder named after its content: the same file dropped again is kept once,
 * and nothing is ever overwritten.
 *
 * @returns the copy's path
 * @throws Refusal (status 2) when it is empty or the disk has no room; nothing is left behind then
 */
export async function keepDropped(file: DroppedFile, droppedFolder: string): Promise<string> {
  await mkdir(droppedFolder, { recursive: true });
  const room = await freeBytes(droppedFolder);
  if ((file.sizeBytes ?? 0) > room) throw noRoom(droppedFolder);
  const arriving = join(droppedFolder, `${randomUUID()}.part`);
  try {
    const sha256 = await writeHashed(file.bytes, arriving, room);
    return await moveIntoPlace(
      arriving,
      sha256,
      join(droppedFolder, sha256.slice(0, 16)),
      safeFileName(file.name),
    );
  } catch (error) {
    await rm(arriving, { force: true });
    if ((error as NodeJS.ErrnoException).code === 'ENOSPC') throw noRoom(droppedFolder);
    throw error;
  }
}

async function writeHashed(bytes: AsyncIterable<Uint8Array>, path: string, room: number): Promise<string> {
  const hash = createHash('sha256');
  let sizeBytes = 0;
  const watch = new Transform({
    transform(chunk: Uint8Array, _encoding, done) {
      hash.update(chunk);
      sizeBytes += chunk.length;
      if (sizeBytes > room) done(noRoom(dirname(path)));
      else done(null, chunk);
    },
  });
  await pipeline(arrivingWhole(bytes), watch, createWriteStream(path, { flags: 'wx' }));
  if (sizeBytes === 0)
    throw new Refusal('fileEmpty', 2, 'The dropped file is empty; drop a file with footage.');
  return hash.digest('hex');
}

async function* arrivingWhole(bytes: AsyncIterable<Uint8Array>): AsyncGenerator<Uint8Array> {
  try {
    yield* bytes;
  } catch (error) {
    throw new Refusal('dropBroken', 2, 'The dropped file did not arrive whole; drop it again.', {
      cause: error,
    });
  }
}

/** Making a folder either succeeds or tells that it was there: that is what keeps two writers apart. */
async function moveIntoPlace(
  arriving: string,
  sha256: string,
  folder: string,
  name: string,
): Promise<string> {
  try {
    await mkdir(folder);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
    const kept = join(folder, name);
    if ((await sha256Of(kept)) === sha256) {
      await rm(arriving);
      return kept;
    }
    // The same content under another name, or a copy that was changed since: a folder of its own.
    return moved(arriving, join(await mkdtemp(`${folder}-`), name));
  }
  return moved(arriving, join(folder, name));
}

async function moved(from: string, to: string): Promise<string> {
  await rename(from, to);
  return to;
}

async function sha256Of(path: string): Promise<string | null> {
  if (!(await stat(path).catch(() => null))?.isFile()) return null;
  const hash = createHash('sha256');
  await pipeline(createReadStream(path), hash);
  return hash.digest('hex');
}

async function freeBytes(folder: string): Promise<number> {
  const { bavail, bsize } = await statfs(folder);
  return bavail * bsize - reserveBytes;
}

function noRoom(folder: string): Refusal {
  return new Refusal(
    'diskFull',
    2,
    `There is no room for the dropped file in ${basename(folder)} (${folder}); free some space or open the file by its path.`,
  );
}
