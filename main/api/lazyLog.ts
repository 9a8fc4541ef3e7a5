import type { Log } from '../log/log.ts';

/** The log, opened when it is first asked for. An opening that failed can be tried again. */
export class LazyLog {
  readonly #open: () => Promise<Log>;
  #log: Promise<Log> | null = null;

  constructor(open: () => Promise<Log>) {
    this.#open = open;
  }

  get(): Promise<Log> {
    this.#log ??= this.#open().catch((error: unknown) => {
      this.#log = null;
      throw error;
    });
    return this.#log;
  }

  async close(): Promise<void> {
    const log = this.#log;
    this.#log = null;
    await (await log)?.close();
  }
}
