import { missingIsShown, stops } from './check.ts';
import { footage, opening } from './footage.ts';
import { panel } from './panel.ts';
import { job, reduceDraft, reduceProblem, reduction } from './reduction.ts';

/** Reduces the sheet, or says what is still missing and leads to the first of it. */
export async function attemptReduce(): Promise<void> {
  if (opening.value || job.value) return;
  missingIsShown.value = true;
  const [first] = stops.value;
  if (first) {
    panel.value = 'sheet';
    const more = stops.value.length - 1;
    reduceProblem.value = `${first.field}: ${first.text}${more > 0 ? ` (and ${more} more in the sheet)` : ''}`;
    requestAnimationFrame(() => document.getElementById(`field-${first.field}`)?.focus());
    return;
  }
  if (!footage.value) {
    reduceProblem.value = 'Open the footage first.';
    return;
  }
  const before = reduction.value;
  await reduceDraft();
  if (reduction.value !== before) panel.value = 'result';
}
