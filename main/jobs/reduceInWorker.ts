import type { Result } from '../../analysis/sheet/result.ts';
import { Refusal } from '../refusal.ts';
import type { Progress } from './progress.ts';
import type { ReduceOrder } from './reduce.ts';
import { startWorker } from './startWorker.ts';
import type { FromWorker, ToWorker } from './workerMessages.ts';

/** A worker that was told to stop gets this long to end its decoder before the thread is ended. */
const patienceMs = 3000;

/**
 * Runs one reduce job in a worker thread, so that neither the window nor the command line ever blocks.
 *
 * @throws Refusal as reduceSheet; a DOMException named AbortError when cancelled
 */
export function reduceInWorker(
  order: ReduceOrder,
  options: { readonly signal?: AbortSignal; readonly onProgress?: (progress: Progress) => void } = {},
): Promise<Result> {
  const { signal, onProgress } = options;
  if (signal?.aborted) return Promise.reject(cancelled());
  const worker = startWorker('reduceWorker', import.meta.url, order);
  let impatient: NodeJS.Timeout | undefined;

  return new Promise<Result>((resolve, reject) => {
    const onAbort = () => {
      worker.postMessage('cancel' satisfies ToWorker);
      impatient = setTimeout(() => void worker.terminate().then(() => reject(cancelled())), patienceMs);
    };
    signal?.addEventListener('abort', onAbort, { once: true });
    worker.on('message', (message: FromWorker) => {
      if (message.kind === 'progress') onProgress?.(message.progress);
      else if (message.kind === 'done') resolve(message.result);
      else if (message.kind === 'refused') reject(new Refusal(message.code, message.status, message.message));
      else if (message.kind === 'cancelled') reject(cancelled());
      else reject(new Error(message.message));
    });
    worker.on('error', reject);
    worker.on('exit', (code) => {
      signal?.removeEventListener('abort', onAbort);
      clearTimeout(impatient);
      reject(new Error(`The reduce job ended without an answer (exit code ${code}).`)); // without effect once settled
    });
  });
}

function cancelled(): DOMException {
  return new DOMException('The reduction was cancelled.', 'AbortError');
}
