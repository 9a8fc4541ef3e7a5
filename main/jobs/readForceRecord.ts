import { readFile } from 'node:fs/promises';
import { type ForceRecord, parseForceRecord } from '../../analysis/theory/force/parseForceRecord.ts';
import { Refusal } from '../refusal.ts';

/**
 * A load cell's record: time in s and force in N.
 *
 * @throws Refusal (status 2) when it cannot be read, or naming the line that is wrong
 */
export async function readForceRecord(path: string): Promise<ForceRecord> {
  let text: string;
  try {
    text = await readFile(path, 'utf8');
  } catch (error) {
    throw new Refusal(
      'forceNotRead',
      2,
      `loadCell.path: the load cell's record ${path} cannot be read; check the path.`,
      { cause: error },
    );
  }
  const parsed = parseForceRecord(text);
  if ('problem' in parsed) throw new Refusal('forceWrong', 2, `loadCell.path: ${path}: ${parsed.problem}.`);
  return parsed;
}
