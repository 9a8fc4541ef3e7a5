import { open, rename, rm, stat } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import type { Result } from '../../analysis/sheet/result.ts';
import { exactJson } from '../log/exactJson.ts';
import { Refusal } from '../refusal.ts';

/**
 * Finds out before the work starts whether the result can be written there.
 *
 * @throws Refusal (status 2): the folder is missing or cannot be written to, or something other than a result is in the place
 */
export async function refuseUnwritable(path: string): Promise<void> {
  const folder = dirname(path);
  const there = await stat(folder).catch(() => null);
  if (!there?.isDirectory()) {
    throw refusal(`--out ${path}: there is no folder ${folder}; make it, or give another one.`);
  }
  const inPlace = await stat(path).catch(() => null);
  if (inPlace?.isDirectory()) {
    throw refusal(`--out ${path}: this is a folder; give the name of a file.`);
  }
  if (inPlace && !(inPlace.isFile() && (await isResult(path)))) {
    throw refusal(
      `--out ${path}: there is a file that is not a result; it is left alone, give another name.`,
    );
  }
  const part = partBeside(path);
  try {
    await (await open(part, 'wx')).close();
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    throw refusal(`--out ${path}: nothing can be written in ${folder} (${why}); give another folder.`, error);
  } finally {
    await rm(part, { force: true });
  }
}

/** Writes a result in one step: whoever looks sees the old file or the whole new one. */
export async function writeResult(path: string, result: Result): Promise<void> {
  const text = `${exactJson(result)}\n`;
  const part = partBeside(path);
  try {
    const file = await open(part, 'wx');
    try {
      await file.writeFile(text);
      await file.sync();
    } finally {
      await file.close();
    }
    await rename(part, path);
  } catch (error) {
    await rm(part, { force: true });
    const why = error instanceof Error ? error.message : String(error);
    throw new Refusal('resultNotWritten', 1, `Result ${path}: it could not be written (${why}).`, {
      cause: error,
    });
  }
}

function partBeside(path: string): string {
  return join(dirname(path), `.${basename(path)}.${process.pid}.part`);
}

/** Results start with their schema; the beginning is enough to tell them from a sheet or from footage. */
async function isResult(path: string): Promise<boolean> {
  const file = await open(path, 'r');
  try {
    const { buffer, bytesRead } = await file.read(Buffer.alloc(200), 0, 200, 0);
    return /^\s*\{\s*"schema"\s*:\s*"tetherfall\/result\//.test(buffer.toString('utf8', 0, bytesRead));
  } finally {
    await file.close();
  }
}

function refusal(message: string, cause?: unknown): Refusal {
  return new Refusal('outWrong', 2, message, { cause });
}
