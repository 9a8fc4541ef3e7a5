import { homedir } from 'node:os';
import { fileURLToPath } from 'node:url';
import type { Services } from '../api/services.ts';
import { dataFolder, logPath } from '../dataFolder.ts';
import { openFootage } from '../footage/openFootage.ts';
import { reduceInWorker } from '../jobs/reduceInWorker.ts';
import { openLog } from '../log/openLog.ts';
import { program } from '../program.ts';

/** The real services, for a host that adds its name and its shell. */
export function realServices(
  own: Pick<Services, 'host' | 'shell'> & { readonly log?: string | undefined },
): Services {
  return {
    host: own.host,
    shell: own.shell,
    program,
    openFootage: (path) => openFootage(path),
    reduceInWorker,
    openLog: (path) => openLog(path),
    logPath: logPath(own.log),
    dataFolder: dataFolder(),
    homeFolder: homedir(),
    rendererFolder: fileURLToPath(new URL(rendererFrom(import.meta.url), import.meta.url)),
  };
}

/** The window is built to dist/renderer, beside dist/main; a source checkout looks there too. */
function rendererFrom(caller: string): string {
  return caller.endsWith('.ts') ? '../../dist/renderer' : '../renderer';
}
