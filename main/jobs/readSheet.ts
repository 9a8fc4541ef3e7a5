import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import { dirname, resolve } from 'node:path';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import type { Finding } from '../../analysis/sheet/result.ts';
import type { Sheet } from '../../analysis/sheet/sheet.ts';
import { Refusal } from '../refusal.ts';

export interface SheetFile {
  readonly sheet: Sheet;
  /** SHA-256 of the file's bytes. */
  readonly sheetSha256: string;
  /** What the sheet's relative paths are relative to. */
  readonly folder: string;
  readonly findings: readonly Finding[];
}

/**
 * Reads and checks a sheet file.
 *
 * @throws Refusal (status 2): no such file, not JSON, or not a sheet; all problems in one line
 */
export async function readSheet(path: string): Promise<SheetFile> {
  let bytes: Buffer;
  try {
    bytes = await readFile(path);
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException;
    const known: Record<string, string> = {
      ENOENT: 'there is no such file',
      EISDIR: 'it is a folder, not a file',
    };
    const reason = known[code ?? ''] ?? message;
    throw new Refusal('sheetNotRead', 2, `Sheet ${path}: ${reason}; check the path.`, { cause: error });
  }
  let json: unknown;
  try {
    json = JSON.parse(bytes.toString('utf8').replace(/^\uFEFF/, ''));
  } catch (error) {
    throw new Refusal(
      'sheetNotJson',
      2,
      `Sheet ${path}: not JSON (${(error as Error).message}); save it again as a sheet.`,
      { cause: error },
    );
  }
  const parsed = parseSheet(json);
  if (!parsed.ok) throw new Refusal('sheetWrong', 2, `Sheet ${path}: ${parsed.problems.join('; ')}.`);
  return {
    sheet: parsed.sheet,
    sheetSha256: createHash('sha256').update(bytes).digest('hex'),
    folder: dirname(resolve(path)),
    findings: parsed.findings,
  };
}
