import { randomUUID } from 'node:crypto';
import { rename, rm, stat, writeFile } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import type { Sheet } from '../../analysis/sheet/sheet.ts';
import { Refusal } from '../refusal.ts';

/**
 * Writes a sheet beside its place and moves it there: the file is the old one or the new one, never half of either.
 *
 * @throws Refusal (status 2) when the folder is missing or may not be written
 */
export async function saveSheet(path: string, sheet: Sheet): Promise<void> {
  const arriving = join(dirname(path), `.${basename(path)}.${randomUUID()}`);
  try {
    await writeFile(arriving, `${JSON.stringify(sheet, null, 2)}\n`, { flag: 'wx' });
    await rename(arriving, path);
  } catch (error) {
    await rm(arriving, { force: true }).catch(() => {}); // where nothing could be written, nothing is to be removed
    const reason = await why(error, path);
    throw new Refusal('sheetNotSaved', 2, `Sheet ${path} cannot be saved: ${reason}.`, { cause: error });
  }
}

async function why(error: unknown, path: string): Promise<string> {
  // Each system has its own code for a file that would replace a folder.
  if ((await stat(path).catch(() => null))?.isDirectory()) return 'it is a folder; give a file name as well';
  const folder = dirname(path);
  const code = (error as NodeJS.ErrnoException).code;
  if (code === 'ENOENT' || code === 'ENOTDIR') return `there is no folder ${folder}`;
  if (code === 'EACCES' || code === 'EPERM' || code === 'EROFS')
    return `this user may not write to ${folder}`;
  if (code === 'ENOSPC') return 'the disk is full';
  return error instanceof Error ? error.message : String(error);
}
