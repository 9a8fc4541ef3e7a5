import { extname } from 'node:path';

/** Endings of the footage that Tetherfall is made for (videos and numbered stills), without the dot. */
export const footageEndings = [
  'ts',
  'mts',
  'mxf',
  'wmv',
  'mp4',
  'mov',
  'm4v',
  'avi',
  'mkv',
  'webm',
  'png',
  'tif',
  'tiff',
] as const;

export type FileKind = 'footage' | 'sheet' | 'other';

/** What a file may be opened as, judged by its name alone; opening it decides. */
export function fileKind(name: string): FileKind {
  const ending = extname(name).slice(1).toLowerCase();
  if (ending === 'json') return 'sheet';
  return footageEndings.some((known) => known === ending) ? 'footage' : 'other';
}
