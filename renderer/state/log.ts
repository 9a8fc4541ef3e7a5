import { signal } from '@preact/signals';
import type { ReductionSummary } from '../../main/log/log.ts';
import { answered, api, lineOf } from './api.ts';
import { replaceDraft, sheetFolder, sheetPath } from './draft.ts';
import { draftOf } from './draftSheet.ts';
import { afterLeaving, carriedOver, show } from './drop.ts';
import { footageGone, footageProblem, loadFootage } from './footage.ts';
import { keepSheet } from './keptSheet.ts';
import { panel } from './panel.ts';
import { isUnsaved, leaveReduction, reduction } from './reduction.ts';

export const saved = signal<readonly ReductionSummary[] | null>(null);
export const logProblem = signal<string | null>(null);
export const saveProblem = signal<string | null>(null);
export const saving = signal(false);
/** What checking the chain said last. */
export const chainSaid = signal<{ readonly sound: boolean; readonly text: string } | null>(null);

export async function readLog(): Promise<void> {
  try {
    saved.value = await answered(api.log.reductions.$get());
    logProblem.value = null;
  } catch (error) {
    logProblem.value = lineOf(error);
  }
}

/** By key: nothing happens where there is nothing to save. */
export async function saveUnsaved(): Promise<void> {
  if (isUnsaved.value) await saveToLog();
}

/** @returns true when the reduction is in the log */
export async function saveToLog(): Promise<boolean> {
  const now = reduction.value;
  if (!now?.jobId || saving.value) return false;
  saving.value = true;
  try {
    const row = await answered(api.log.reductions.$post({ json: { jobId: now.jobId } }));
    if (reduction.value?.jobId === now.jobId) reduction.value = { ...now, savedId: row.id };
    saveProblem.value = null;
    await readLog();
    return true;
  } catch (error) {
    saveProblem.value = lineOf(error);
    return false;
  } finally {
    saving.value = false;
  }
}

/** Brings a saved reduction back: its sheet, result and, where it is still the same file, its footage. */
export function openFromLog(id: number): void {
  afterLeaving('resultAndSheet', async () => {
    try {
      const row = await answered(api.log.reductions[':id'].$get({ param: { id: String(id) } }));
      const draft = { ...draftOf(row.sheet), footage: { ...row.sheet.footage, path: row.footagePath } };
      replaceDraft(draft);
      keepSheet();
      sheetFolder.value = null;
      sheetPath.value = null;
      carriedOver.value = null;
      leaveReduction({ result: row.result, draft, jobId: null, savedId: row.id });
      panel.value = 'result';
      show(null);
      await showFootageOf(row);
    } catch (error) {
      logProblem.value = lineOf(error);
    }
  });
}

async function showFootageOf({ footagePath, footageSha256 }: ReductionSummary): Promise<void> {
  const found = await loadFootage(footagePath);
  if (found?.sha256 === footageSha256) {
    show(found);
    return;
  }
  footageGone.value = found
    ? `The file at ${footagePath} is not the footage that was reduced (its SHA-256 differs), so no picture is shown.`
    : footageProblem.value;
  footageProblem.value = null;
}

export async function checkChain(): Promise<void> {
  try {
    const { fault } = await answered(api.log.verify.$get());
    chainSaid.value = fault
      ? { sound: false, text: `The chain breaks at reduction no. ${fault.id}: ${fault.reason}` }
      : { sound: true, text: 'The chain is whole: no saved reduction was changed since.' };
  } catch (error) {
    logProblem.value = lineOf(error);
  }
}
