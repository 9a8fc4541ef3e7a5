import { readFile } from 'node:fs/promises';
import { resolve } from 'node:path';
import type { Command } from 'commander';
import { settle } from '../../analysis/sheet/assumptions.ts';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import type { Finding } from '../../analysis/sheet/result.ts';
import type { Sheet } from '../../analysis/sheet/sheet.ts';
import { footageInput } from '../footage/footageInput.ts';
import { readSheet } from '../jobs/readSheet.ts';
import { readTimes } from '../jobs/readTimes.ts';
import { Refusal } from '../refusal.ts';
import { fromHere } from './fromHere.ts';
import { findingLines } from './summary.ts';

export function addCheck(root: Command): void {
  root
    .command('check')
    .description('say what is missing or inconsistent in a sheet, without decoding the footage')
    .argument('<sheet>', 'the sheet of the drop (JSON)')
    .addHelpText('after', '\nExit status: 0 the sheet can be reduced, 2 it cannot.')
    .action(check);
}

async function check(typed: string): Promise<void> {
  const path = fromHere(typed);
  const findings = await findingsOf(path);
  const stops = findings.filter((f) => f.level === 'stop').length;
  const lines = [`Sheet ${path}`, ...findingLines(findings)];
  if (stops === 0) lines.push(findings.length === 0 ? 'Complete; it can be reduced.' : 'It can be reduced.');
  process.stdout.write(`${lines.join('\n')}\n`);
  if (stops > 0) {
    const what = stops === 1 ? 'one thing stops it' : `${stops} things stop it`;
    throw new Refusal(
      'sheetStopped',
      2,
      `Sheet ${path} cannot be reduced: ${what}; mend the lines marked "stop".`,
    );
  }
}

/** @throws Refusal (status 2) when the file cannot be read or is not JSON */
async function findingsOf(path: string): Promise<readonly Finding[]> {
  try {
    const { sheet, folder, findings } = await readSheet(path);
    const around = [...(await footageFindings(sheet, folder)), ...(await timesFindings(sheet, folder))];
    return [...findings, ...checkSheet(sheet), ...around, ...settle(sheet).findings];
  } catch (error) {
    if (!(error instanceof Refusal && error.code === 'sheetWrong')) throw error;
    // it is JSON but not a sheet: each problem gets its own line here
    const parsed = parseSheet(JSON.parse((await readFile(path, 'utf8')).replace(/^\uFEFF/, '')));
    if (parsed.ok) throw error;
    return parsed.problems.map((text) => stop('sheetWrong', text));
  }
}

async function footageFindings(sheet: Sheet, folder: string): Promise<readonly Finding[]> {
  try {
    const input = await footageInput(resolve(folder, sheet.footage.path));
    return input.kind === 'stills' ? input.findings : [];
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    return [stop(error.code, `footage.path: ${error.message}.`)];
  }
}

async function timesFindings({ clock }: Sheet, folder: string): Promise<readonly Finding[]> {
  if (clock.kind !== 'timestamps') return [];
  try {
    await readTimes(resolve(folder, clock.path));
    return [];
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    return [stop(error.code, error.message)];
  }
}

function stop(code: string, text: string): Finding {
  return { level: 'stop', code, text };
}
