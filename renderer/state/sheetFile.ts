import { signal } from '@preact/signals';
import type { SheetInput } from '../../analysis/sheet/sheet.ts';
import { answered, api, lineOf } from './api.ts';
import { missingIsShown } from './check.ts';
import { draft, emptyDraft, replaceDraft, sheetFolder, sheetPath, unreadable } from './draft.ts';
import { draftOf, sheetJson } from './draftSheet.ts';
import { afterLeaving, carriedOver, show, wholePath } from './drop.ts';
import { footage, loadFootage } from './footage.ts';
import { keepSheet } from './keptSheet.ts';
import { panel } from './panel.ts';
import { leaveReduction } from './reduction.ts';

export const sheetProblem = signal<string | null>(null);
export const sheetNote = signal<string | null>(null);

/** Opens a sheet file and the footage that it names. */
export function openSheet(path: string): void {
  afterLeaving('resultAndSheet', async () => {
    sheetNote.value = null;
    try {
      const opened = await answered(api.sheets.open.$post({ json: { path } }));
      replaceDraft(draftOf(opened.sheet));
      keepSheet();
      sheetFolder.value = opened.folder;
      sheetPath.value = opened.path;
      sheetProblem.value = null;
      panel.value = 'sheet';
      carriedOver.value = null;
      leaveReduction();
      show(null); // not the old picture under the new sheet
      show(await loadFootage(wholePath(opened.sheet.footage.path)));
    } catch (error) {
      sheetProblem.value = lineOf(error);
    }
  });
}

/** @returns true when every field can be read; else says which cannot: left out of a file, it would be gone without a word */
export function canBeSaved(): boolean {
  const [first] = unreadable.value;
  if (!first) return true;
  const [field, { problem }] = first;
  sheetNote.value = null;
  sheetProblem.value = `${field}: ${problem}; put it right, then save the sheet`;
  return false;
}

/** Saves the sheet as it stands; paths below its folder become relative to it. */
export async function saveSheetAs(path: string): Promise<void> {
  const withEnding = /\.json$/i.test(path) ? path : `${path}.json`;
  try {
    const sheet = sheetJson(draft.value) as unknown as SheetInput; // the program checks it
    const saved = await answered(
      api.sheets.save.$post({ json: { path: withEnding, sheet, folder: sheetFolder.value } }),
    );
    sheetFolder.value = saved.folder;
    sheetPath.value = saved.path;
    draft.value = { ...draft.value, footage: saved.sheet.footage };
    keepSheet();
    sheetProblem.value = null;
    sheetNote.value = `Saved as ${saved.path}`;
  } catch (error) {
    sheetProblem.value = lineOf(error);
  }
}

/** Starts a sheet from nothing on the footage that is open. */
export function newSheet(): void {
  afterLeaving('resultAndSheet', () => {
    const path = footage.value?.path;
    replaceDraft({ ...emptyDraft, footage: path === undefined ? {} : { path } });
    keepSheet();
    sheetFolder.value = null;
    sheetPath.value = null;
    sheetProblem.value = null;
    sheetNote.value = null;
    carriedOver.value = null;
    leaveReduction();
    missingIsShown.value = false;
  });
}
