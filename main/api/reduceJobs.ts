import { randomUUID } from 'node:crypto';
import type { ReduceOrder } from '../jobs/reduce.ts';
import { Refusal } from '../refusal.ts';
import { ReduceJob } from './reduceJob.ts';
import type { RunReduceJob } from './services.ts';

/** A result is some megabytes; these can still be asked for and saved. */
const mostSettled = 8;

/** The reduce jobs of this start, in the order they were asked for. One runs at a time: each uses all the machine can give. */
export class ReduceJobs {
  readonly #reduce: RunReduceJob;
  readonly #jobs = new Map<string, ReduceJob>();
  #lastRun: Promise<void> = Promise.resolve();

  constructor(reduce: RunReduceJob) {
    this.#reduce = reduce;
  }

  add(order: ReduceOrder): ReduceJob {
    const job = new ReduceJob(randomUUID(), order);
    this.#jobs.set(job.id, job);
    this.#lastRun = this.#lastRun.then(() => job.run(this.#reduce)).then(() => this.#forgetOldest());
    return job;
  }

  /** @throws Refusal (status 2) when there is no such job (any more) */
  get(id: string): ReduceJob {
    const job = this.#jobs.get(id);
    if (!job) throw new Refusal('jobUnknown', 2, `There is no job ${id} (any more); reduce the sheet again.`);
    return job;
  }

  /** Cancels everything and waits until the last worker has stopped. */
  async close(): Promise<void> {
    for (const job of this.#jobs.values()) job.cancel();
    await this.#lastRun;
  }

  #forgetOldest(): void {
    const settled = [...this.#jobs.values()].filter((job) => job.settled);
    for (const job of settled.slice(0, -mostSettled)) this.#jobs.delete(job.id);
  }
}
