import type { Result } from '../../analysis/sheet/result.ts';
import type { ReduceOrder } from '../jobs/reduce.ts';
import type { ReductionSummary } from '../log/log.ts';
import { Refusal } from '../refusal.ts';
import { unexpectedMessage } from './errorAnswer.ts';
import type { JobEnd, JobEvent } from './jobEvents.ts';
import type { RunReduceJob } from './services.ts';

/** One reduction that was asked for: where it stands, who listens, and its result once it is done. */
export class ReduceJob {
  readonly id: string;
  readonly order: ReduceOrder;
  readonly #cancel = new AbortController();
  readonly #listeners = new Set<(event: JobEvent) => void>();
  #latest: JobEvent = { event: 'queued' };
  #saved: Promise<ReductionSummary> | null = null;

  constructor(id: string, order: ReduceOrder) {
    this.id = id;
    this.order = order;
  }

  get settled(): boolean {
    return isEnd(this.#latest);
  }

  /** @throws Refusal (status 2) when the job has none (yet) */
  result(): Result {
    if (this.#latest.event !== 'done')
      throw new Refusal('jobNotDone', 2, `Job ${this.id} has no result (it is ${this.#latest.event}).`);
    return this.#latest.result;
  }

  /** Runs the job to its end. Never rejects: an end is an event. */
  async run(reduce: RunReduceJob): Promise<void> {
    if (this.settled) return;
    const onProgress = (progress: Parameters<NonNullable<Parameters<RunReduceJob>[1]['onProgress']>>[0]) => {
      if (!this.settled) this.#say({ event: 'progress', ...progress });
    };
    const end = await reduce(this.order, { signal: this.#cancel.signal, onProgress }).then(
      (result): JobEnd => ({ event: 'done', result }),
      (error: unknown) => this.#endOf(error),
    );
    this.#say(end);
  }

  /** A job that waits ends at once; one that runs ends when its worker has stopped; one that ended stays as it is. */
  cancel(): void {
    this.#cancel.abort();
    if (this.#latest.event === 'queued') this.#say({ event: 'cancelled' });
  }

  /** Says where the job stands at once, then every change, until it ends or the signal is aborted. */
  follow(send: (event: JobEvent) => void, signal: AbortSignal): Promise<void> {
    send(this.#latest);
    if (this.settled || signal.aborted) return Promise.resolve();
    return new Promise((resolve) => {
      const stop = () => {
        this.#listeners.delete(listener);
        resolve();
      };
      const listener = (event: JobEvent) => {
        send(event);
        if (isEnd(event)) stop();
      };
      this.#listeners.add(listener);
      signal.addEventListener('abort', stop, { once: true });
    });
  }

  /** Saves the result by `save`, once: asked again, the same answer. A save that failed can be tried again. */
  saveOnce(save: () => Promise<ReductionSummary>): Promise<ReductionSummary> {
    this.#saved ??= save().catch((error: unknown) => {
      this.#saved = null;
      throw error;
    });
    return this.#saved;
  }

  #endOf(error: unknown): JobEnd {
    if (this.#cancel.signal.aborted) return { event: 'cancelled' };
    const { code, status, message } =
      error instanceof Refusal
        ? error
        : new Refusal('unexpected', 1, unexpectedMessage(`reduce job ${this.id}`, error));
    return { event: 'refused', code, status, message };
  }

  #say(event: JobEvent): void {
    this.#latest = event;
    for (const listener of [...this.#listeners]) listener(event);
  }
}

function isEnd(event: JobEvent): boolean {
  return event.event === 'done' || event.event === 'refused' || event.event === 'cancelled';
}
