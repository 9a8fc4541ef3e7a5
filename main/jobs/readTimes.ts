import { readFile } from 'node:fs/promises';
import { Refusal } from '../refusal.ts';

/**
 * A list of times: one number in seconds per line, the last column where there are several (CSV, RFC 4180 without quotes);
 * a heading line is passed over.
 *
 * @throws Refusal (status 2) naming the line that is no time
 */
export async function readTimes(path: string): Promise<Float64Array> {
  let text: string;
  try {
    text = await readFile(path, 'utf8');
  } catch (error) {
    throw new Refusal(
      'timesNotRead',
      2,
      `clock.path: the list of times ${path} cannot be read; check the path.`,
      { cause: error },
    );
  }
  const lines = text.split(/\r?\n/).map((line) => line.trim());
  while (lines.at(-1) === '') lines.pop();
  const timesS: number[] = [];
  lines.forEach((line, i) => {
    const field =
      line
        .split(/[,;\t]/)
        .at(-1)
        ?.trim() ?? '';
    const value = field === '' ? Number.NaN : Number(field);
    if (Number.isFinite(value)) timesS.push(value);
    else if (i > 0)
      throw new Refusal(
        'timesWrong',
        2,
        `clock.path: line ${i + 1} of ${path} is no time in seconds ("${line}").`,
      );
  });
  if (timesS.length === 0)
    throw new Refusal(
      'timesWrong',
      2,
      `clock.path: ${path} holds no times; give one time in seconds per line.`,
    );
  return Float64Array.from(timesS);
}
