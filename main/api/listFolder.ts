import { readdir, stat } from 'node:fs/promises';
import { dirname, join, resolve } from 'node:path';
import { type FileKind, fileKind } from '../hosts/fileKinds.ts';
import { Refusal } from '../refusal.ts';

interface ListedFile {
  readonly name: string;
  readonly path: string;
  readonly kind: FileKind;
  readonly sizeBytes: number;
  /** ISO 8601, UTC. */
  readonly modifiedAt: string;
}

export interface ListedFolder {
  readonly folder: string;
  /** Null at the top of the file system. */
  readonly parent: string | null;
  readonly home: string;
  readonly folders: readonly { readonly name: string; readonly path: string }[];
  readonly files: readonly ListedFile[];
}

/**
 * What is in a folder, by name; hidden entries and those that cannot be looked at are left out.
 *
 * @throws Refusal (status 2) when the folder cannot be read
 */
export async function listFolder(asked: string, home: string): Promise<ListedFolder> {
  const folder = resolve(asked);
  const names = await readdir(folder).catch((error: NodeJS.ErrnoException) => {
    throw new Refusal('folderNotRead', 2, `Folder ${folder} ${why(error)}.`, { cause: error });
  });
  const folders: { name: string; path: string }[] = [];
  const files: ListedFile[] = [];
  for (const name of names.filter((n) => !n.startsWith('.')).sort(byName)) {
    const path = join(folder, name);
    const facts = await stat(path).catch(() => null); // a broken link, or not ours to see: nothing that could be opened
    if (facts?.isDirectory()) folders.push({ name, path });
    else if (facts?.isFile()) {
      const modifiedAt = facts.mtime.toISOString();
      files.push({ name, path, kind: fileKind(name), sizeBytes: facts.size, modifiedAt });
    }
  }
  const up = dirname(folder);
  return { folder, parent: up === folder ? null : up, home, folders, files };
}

/** As a person orders names: drop2 before drop10. */
const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' }).compare;

function why(error: NodeJS.ErrnoException): string {
  if (error.code === 'ENOENT') return 'is not there; check the path';
  if (error.code === 'ENOTDIR') return 'is not a folder; give the folder that holds the file';
  if (error.code === 'EACCES' || error.code === 'EPERM') return 'may not be read by this user; pick another';
  return `cannot be read (${error.code ?? error.message}); pick another`;
}
