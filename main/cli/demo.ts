import { mkdir, readdir, rename, rm, rmdir } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import type { Command } from 'commander';
import { dataFolder } from '../dataFolder.ts';
import { Refusal } from '../refusal.ts';
import { fromHere } from './fromHere.ts';
import { interruptible } from './interruptible.ts';
import { reduction, warnIfNotLogged } from './reduction.ts';
import { noProgress, progressFor } from './showProgress.ts';
import { summary } from './summary.ts';

interface DemoOptions {
  readonly folder?: string;
  readonly log?: string;
  readonly quiet?: true;
}

const sheetName = 'sheet.json';
const resultName = 'result.json';

export function addDemo(root: Command): void {
  root
    .command('demo')
    .description('make the footage of a demo drop, reduce it and save it in the log')
    .option('--folder <folder>', "where to put the demo (else in the user's data folder)")
    .option('--log <file>', "the log's file (else TETHERFALL_LOG, else in the user's data folder)")
    .option('--quiet', 'show no progress')
    .action(demo);
}

async function demo(options: DemoOptions): Promise<void> {
  const folder = options.folder === undefined ? join(dataFolder(), 'demo') : fromHere(options.folder);
  const progress = options.quiet ? noProgress : progressFor(process.stderr);
  const { title, done } = await interruptible(async (signal) => {
    if (!options.quiet)
      process.stderr.write('Making the footage of the demo drop; this takes a while (10 to 30 s).\n');
    const title = await makeDemoIn(folder, signal);
    const sheetPath = join(folder, sheetName);
    const resultPath = join(folder, resultName);
    const done = await reduction({ sheetPath, resultPath, log: options.log, progress, signal });
    return { title, done };
  });
  warnIfNotLogged(done);
  const { sheet, result, logged, footagePath } = done;
  const lines = [title, '', ...summary(sheet, result), ''];
  lines.push(`Footage  ${footagePath}`, `Sheet    ${join(folder, sheetName)}`, `Result   ${done.resultPath}`);
  if (logged !== null && 'id' in logged) lines.push(`Log      reduction ${logged.id} in ${logged.path}`);
  lines.push('', 'Next: npm start opens the window; open the sheet there, or the reduction in the log.');
  process.stdout.write(`${lines.join('\n')}\n`);
}

/**
 * Makes the demo's files and puts them into the folder once all are whole. An earlier demo there is replaced, anything else
 * is left alone.
 *
 * @returns the drop's title
 */
async function makeDemoIn(folder: string, signal: AbortSignal): Promise<string> {
  await refuseForeign(folder);
  const part = join(folder, `.${process.pid}.part`);
  const firstNew = await makeFolders(folder, part);
  let whole = false;
  try {
    // loaded here: no other command needs the maker of footage
    const { makeDemo } = await import('../../fixtures/demo.ts');
    signal.throwIfAborted(); // loading takes long enough for a Ctrl-C
    const { title, footagePath, sheetPath } = await Promise.race([makeDemo(part), rejectedBy(signal)]);
    if (basename(sheetPath) !== sheetName)
      throw new Error(`demo: its sheet is called ${basename(sheetPath)}`);
    for (const name of await readdir(part)) await rename(join(part, name), join(folder, name));
    await rm(join(folder, resultName), { force: true }); // of an earlier demo
    if (!(await readdir(folder)).includes(basename(footagePath)))
      throw new Error('demo: its footage is missing');
    whole = true;
    return title;
  } finally {
    await rm(part, { recursive: true, force: true, maxRetries: 3 });
    if (firstNew !== undefined && !whole) await removeEmpty(folder, firstNew);
  }
}

/** Removes empty folders from `folder` up to `last`; one in which someone put something meanwhile stays. */
async function removeEmpty(folder: string, last: string): Promise<void> {
  try {
    await rmdir(folder);
  } catch {
    return; // not empty: rmdir removes nothing else
  }
  if (folder !== last && folder.startsWith(last)) await removeEmpty(dirname(folder), last);
}

/**
 * Makes the demo's folder, if it is missing, and the one for its unfinished files.
 *
 * @returns the first of the folders that had to be made for the demo's, undefined when it was there
 * @throws Refusal (status 2) when nothing can be written there
 */
async function makeFolders(folder: string, part: string): Promise<string | undefined> {
  try {
    const firstNew = await mkdir(folder, { recursive: true });
    await mkdir(part, { recursive: true });
    return firstNew;
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    throw new Refusal(
      'folderWrong',
      2,
      `--folder ${folder}: nothing can be written there (${why}); give another folder.`,
      { cause: error },
    );
  }
}

function rejectedBy(signal: AbortSignal): Promise<never> {
  return new Promise((_, reject) =>
    signal.addEventListener('abort', () => reject(signal.reason), { once: true }),
  );
}

/** @throws Refusal (status 2) when the folder holds something other than an earlier demo */
async function refuseForeign(folder: string): Promise<void> {
  let names: readonly string[];
  try {
    names = await readdir(folder);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return;
    throw new Refusal(
      'folderWrong',
      2,
      `--folder ${folder}: this is not a folder that can be read; give another one.`,
      {
        cause: error,
      },
    );
  }
  const own = new Set([sheetName, resultName, 'truth.json', 'sling-release.mp4']);
  const foreign = names.find((name) => !own.has(name) && !name.endsWith('.part'));
  if (foreign !== undefined) {
    throw new Refusal(
      'folderWrong',
      2,
      `--folder ${folder}: it holds other files (${foreign}); give an empty or new one.`,
    );
  }
}
