import { Command } from 'commander';
import { program } from '../program.ts';
import { addCheck } from './check.ts';
import { addDemo } from './demo.ts';
import { addLens } from './lens.ts';
import { addLogList } from './logList.ts';
import { addLogShow } from './logShow.ts';
import { addLogVerify } from './logVerify.ts';
import { addPlan } from './plan.ts';
import { addReduce } from './reduce.ts';
import { tell } from './tell.ts';

const exitStatuses = `
Exit status: 0 done, 2 the sheet or the command is wrong, 3 the footage cannot be read, 4 a body was lost so that no
key value can be given, 130 stopped with Ctrl-C, 1 anything else. TETHERFALL_DEBUG=1 shows where an error came from.`;

/**
 * Runs one command to its end.
 *
 * @param args  what the user typed after the program's name
 * @returns the exit status; errors have been told on standard error, in one line each
 */
export async function commandLine(args: readonly string[]): Promise<number> {
  const root = new Command('tetherfall')
    .description('Reduces footage of drop tests to velocities and accelerations with stated uncertainty.')
    .version(
      `tetherfall ${program.version} (commit ${program.commit})`,
      '--version',
      'print version and commit',
    )
    .helpOption('--help', 'print this help')
    .addHelpText('after', exitStatuses)
    .exitOverride()
    .configureOutput({ writeErr: () => {}, outputError: () => {} }); // tell() says it in one line
  addReduce(root);
  addCheck(root);
  addPlan(root);
  addLens(root);
  addDemo(root);
  const log = root.command('log').description('look into the log: the reductions that were saved');
  addLogList(log);
  addLogShow(log);
  addLogVerify(log);
  try {
    await root.parseAsync(args, { from: 'user' });
    return 0;
  } catch (error) {
    return tell(error);
  }
}
