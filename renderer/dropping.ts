import { signal } from '@preact/signals';
import { openDropped } from './state/drop.ts';
import { footageProblem } from './state/footage.ts';

/** True while a file is held over the window. */
export const fileOver = signal(false);

/** A file dropped anywhere on the window is opened as footage. */
export function acceptDrops(): void {
  window.addEventListener('dragover', (event) => {
    event.preventDefault();
    fileOver.value = event.dataTransfer?.types.includes('Files') ?? false;
  });
  window.addEventListener('dragleave', (event) => {
    if (event.relatedTarget === null) fileOver.value = false;
  });
  window.addEventListener('drop', (event) => {
    event.preventDefault();
    fileOver.value = false;
    const files = event.dataTransfer?.files;
    const file = files?.[0];
    if (!files || !file) return;
    if (files.length > 1)
      footageProblem.value = 'Drop one file; open numbered stills by their path (drop-%05d.tif).';
    else openDropped(file);
  });
}
