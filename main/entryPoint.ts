import { createRequire } from 'node:module';
import { pathToFileURL } from 'node:url';

/**
 * Where a worker's or helper process's file is: TypeScript run by tsx in a source checkout and in tests, JavaScript beside
 * the caller after a build (dist/main is flat).
 *
 * @param name    file name without ending, in the folder of the caller
 * @param caller  the caller's import.meta.url
 */
export function entryPoint(name: string, caller: string): { url: URL; execArgv: string[] } {
  const fromSource = caller.endsWith('.ts');
  return {
    url: new URL(`./${name}.${fromSource ? 'ts' : 'js'}`, caller),
    execArgv: fromSource ? ['--import', loader()] : [],
  };
}

function loader(): string {
  return pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href;
}
