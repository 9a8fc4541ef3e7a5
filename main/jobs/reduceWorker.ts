import { parentPort, workerData } from 'node:worker_threads';
import { openFootage } from '../footage/openFootage.ts';
import { Refusal } from '../refusal.ts';
import { type ReduceOrder, reduceSheet } from './reduce.ts';
import { loadWideSearch } from './wideSearch.ts';
import type { FromWorker, ToWorker } from './workerMessages.ts';

// The worker thread of one reduce job: order in by workerData, progress and one answer out by messages.
const port = parentPort;
if (!port) throw new Error('reduceWorker runs in a worker thread');
const say = (message: FromWorker) => port.postMessage(message);

const cancel = new AbortController();
port.on('message', (message: ToWorker) => {
  if (message === 'cancel') cancel.abort();
});

try {
  const result = await reduceSheet(workerData as ReduceOrder, {
    openFootage,
    loadSearch: loadWideSearch,
    signal: cancel.signal,
    onProgress: (progress) => say({ kind: 'progress', progress }),
  });
  say({ kind: 'done', result });
} catch (error) {
  if (cancel.signal.aborted) say({ kind: 'cancelled' });
  else if (error instanceof Refusal)
    say({ kind: 'refused', code: error.code, status: error.status, message: error.message });
  else
    say({ kind: 'failed', message: error instanceof Error ? (error.stack ?? error.message) : String(error) });
} finally {
  port.close();
}
