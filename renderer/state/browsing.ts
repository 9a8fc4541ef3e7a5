import { signal } from '@preact/signals';
import type { ListedFolder } from '../../main/api/listFolder.ts';
import { answered, api, lineOf } from './api.ts';
import { openFootage } from './drop.ts';
import { footage } from './footage.ts';
import { program, windowProblem } from './program.ts';
import { canBeSaved, openSheet, saveSheetAs } from './sheetFile.ts';

export type Purpose = 'openFootage' | 'openSheet' | 'saveSheet';

/** The file browser while it is open. */
export const browsing = signal<{ readonly purpose: Purpose } | null>(null);
export const listed = signal<ListedFolder | null>(null);
export const browseProblem = signal<string | null>(null);

/** Asks for a file by the system's own dialog where the host has them, else in the window's file browser. */
export async function askForFile(purpose: Purpose, suggestedName = 'sheet.json'): Promise<void> {
  if (purpose === 'saveSheet' && !canBeSaved()) return;
  browseProblem.value = null;
  if (!program.value?.dialogs) {
    browsing.value = { purpose };
    await listFolder(listed.value?.folder ?? folderOf(footage.value?.path));
    return;
  }
  const asked =
    purpose === 'saveSheet'
      ? api.shell['save-file'].$post({ json: { kind: 'sheet', suggestedName } })
      : api.shell['open-file'].$post({ json: { kind: purpose === 'openFootage' ? 'footage' : 'sheet' } });
  try {
    const { path } = await answered(asked);
    if (path !== null) takeFile(purpose, path);
  } catch (error) {
    windowProblem.value = lineOf(error);
  }
}

export function takeFile(purpose: Purpose, path: string): void {
  browsing.value = null;
  if (purpose === 'openFootage') openFootage(path);
  else if (purpose === 'openSheet') openSheet(path);
  else void saveSheetAs(path);
}

export async function listFolder(folder: string | undefined): Promise<void> {
  try {
    listed.value = await answered(api.files.$get({ query: folder === undefined ? {} : { folder } }));
    browseProblem.value = null;
  } catch (error) {
    browseProblem.value = lineOf(error);
  }
}

function folderOf(path: string | undefined): string | undefined {
  return path === undefined ? undefined : path.replace(/[\\/][^\\/]*$/, '') || undefined;
}
