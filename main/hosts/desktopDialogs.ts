import { type BrowserWindow, dialog, type FileFilter } from 'electron';
import { footageEndings } from './fileKinds.ts';
import type { Shell } from './shell.ts';

const filters: Readonly<Record<'footage' | 'sheet' | 'result', FileFilter>> = {
  footage: { name: 'Footage', extensions: [...footageEndings] },
  sheet: { name: 'Sheet', extensions: ['json'] },
  result: { name: 'Result', extensions: ['json'] },
};

/** The system's own dialogs, in front of the window. */
export function desktopDialogs(window: () => BrowserWindow): Shell {
  return {
    dialogs: true,
    async openFile(kind) {
      const everything = { name: 'All files', extensions: ['*'] };
      const picked = await dialog.showOpenDialog(window(), {
        properties: ['openFile'],
        filters: [filters[kind], everything],
      });
      return picked.canceled ? null : (picked.filePaths[0] ?? null);
    },
    async saveFile(kind, suggestedName) {
      const picked = await dialog.showSaveDialog(window(), {
        defaultPath: suggestedName,
        filters: [filters[kind]],
        properties: ['showOverwriteConfirmation'],
      });
      return picked.canceled ? null : picked.filePath;
    },
  };
}
