import { Worker } from 'node:worker_threads';
import { entryPoint } from '../entryPoint.ts';

/**
 * Starts a worker thread from a file in the caller's folder: JavaScript after a build, TypeScript in a source checkout and in
 * tests. A thread does not take up a loader named in its execArgv, so from source it registers tsx itself.
 *
 * @param name    file name without ending
 * @param caller  the caller's import.meta.url
 */
export function startWorker(name: string, caller: string, workerData: unknown): Worker {
  const { url } = entryPoint(name, caller);
  if (!url.pathname.endsWith('.ts')) return new Worker(url, { workerData });
  const tsx = import.meta.resolve('tsx/esm/api');
  const code = `import(${JSON.stringify(tsx)}).then((tsx) => { tsx.register(); return import(${JSON.stringify(url.href)}); });`;
  return new Worker(code, { eval: true, workerData });
}
