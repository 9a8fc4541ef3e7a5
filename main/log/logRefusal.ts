import { Refusal } from '../refusal.ts';

/** What to tell a user of each way in which SQLite or the file system can fail. */
const reasons: Readonly<Record<string, string>> = {
  SQLITE_CANTOPEN: 'the file cannot be opened or made; check that its folder exists and can be written to',
  SQLITE_NOTADB: 'the file is not a log (not an SQLite database); give another file',
  SQLITE_READONLY: 'the file is write-protected; make it writable or give another file',
  SQLITE_PERM: 'the file may not be opened; check its permissions',
  SQLITE_BUSY: 'another program is holding it; close that program and try again',
  SQLITE_FULL: 'the disk is full; make room and try again',
  SQLITE_IOERR: 'the disk cannot be read or written; check the drive or give a file on another one',
  SQLITE_CORRUPT: 'the file is damaged; keep a copy of it, and give another file or bring back a backup',
  EACCES: 'its folder cannot be written to; check its permissions or give another file',
  EPERM: 'its folder cannot be written to; check its permissions or give another file',
  EROFS: 'its folder is on a read-only drive; give a file on another one',
  ENOENT: 'its folder cannot be made; check that the drive and the folders before it exist',
  ENOTDIR: 'a part of its path is a file, not a folder; check the path',
  EEXIST: 'a part of its path is a file, not a folder; check the path',
  ENOSPC: 'the disk is full; make room and try again',
};

/** A Refusal for what a user can mend; anything else stays the error it was. */
export function logRefusal(path: string, error: unknown): unknown {
  if (error instanceof Refusal || !(error instanceof Error)) return error;
  const reason = reasons[(error as NodeJS.ErrnoException).code ?? ''];
  return reason ? new Refusal('logNotUsable', 1, `Log ${path}: ${reason}.`, { cause: error }) : error;
}
