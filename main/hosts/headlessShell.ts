import type { Shell } from './shell.ts';

/** A host without dialogs: the window then shows the server-side file browser. */
export const headlessShell: Shell = {
  dialogs: false,
  openFile: () => Promise.resolve(null),
  saveFile: () => Promise.resolve(null),
};
