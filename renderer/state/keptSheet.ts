import { computed, signal } from '@preact/signals';
import { type Draft, draft, emptyDraft, unreadable } from './draft.ts';
import { reduction } from './reduction.ts';

/** The sheet as it is in a file or in the log, or as it was begun. */
const kept = signal<Draft>(emptyDraft);

/** Takes the sheet as it stands for one that can be had again. */
export function keepSheet(): void {
  kept.value = draft.value;
}

/** True when something was stated that is in no file and in no saved reduction. */
export const sheetIsUnsaved = computed(() => {
  if (unreadable.value.size > 0) return true;
  const now = stated(draft.value);
  const inLog = reduction.value !== null && reduction.value.savedId !== null ? reduction.value.draft : null;
  return now !== stated(kept.value) && (inLog === null || now !== stated(inLog));
});

/** All but the path of the footage: which drop it is, is not work that could be lost. */
function stated({ footage: { path: _, ...frames }, ...rest }: Draft): string {
  return JSON.stringify({ ...rest, ...frames });
}
