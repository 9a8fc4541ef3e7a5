import { isAbsolute, relative, resolve, sep } from 'node:path';
import type { Sheet } from '../../analysis/sheet/sheet.ts';

/**
 * The same sheet for another folder: what its relative paths meant in the old folder, they mean in the new one. Absolute paths
 * below the new folder become relative, so that sheet and footage can be moved together; other absolute paths stay.
 *
 * @param from  what the relative paths are relative to now; null when the sheet was never in a file
 */
export function sheetForFolder(sheet: Sheet, from: string | null, to: string): Sheet {
  const moved = (path: string) => pathForFolder(path, from ?? to, to);
  const { clock, footage, loadCell } = sheet;
  return {
    ...sheet,
    footage: { ...footage, path: moved(footage.path) },
    clock: clock.kind === 'timestamps' ? { ...clock, path: moved(clock.path) } : clock,
    ...(loadCell ? { loadCell: { ...loadCell, path: moved(loadCell.path) } } : {}),
  };
}

function pathForFolder(path: string, from: string, to: string): string {
  if (!isAbsolute(path) && resolve(from) === resolve(to)) return path;
  const fromThere = relative(to, resolve(from, path)); // absolute where it is on another drive of Windows
  const below = !isAbsolute(fromThere) && fromThere.split(sep)[0] !== '..';
  if (isAbsolute(path) && !below) return path;
  return isAbsolute(fromThere) ? fromThere : fromThere.split(sep).join('/');
}
