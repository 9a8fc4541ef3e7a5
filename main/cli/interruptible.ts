const statusOf = { SIGINT: 130, SIGTERM: 143, SIGHUP: 129 } as const;
const interrupts = ['SIGINT', 'SIGTERM', 'SIGHUP'] as const;
type Interrupt = (typeof interrupts)[number];

/** One Ctrl-C arrives up to three times: from the terminal, and passed on by npm and by the TypeScript loader. */
const echoMs = 1000;

/** The user told the program to stop (Ctrl-C, terminal closed), or the system did. */
export class Interrupted extends Error {
  readonly code = 'interrupted';
  /** 128 + the signal's number, as shells do. */
  readonly status: number;

  constructor(by: Interrupt) {
    super('Stopped before it was done; there is no result.');
    this.name = 'Interrupted';
    this.status = statusOf[by];
  }
}

/**
 * Runs work that can be stopped with Ctrl-C: the first one aborts the signal and waits for the work to clean up, a second one
 * ends the program at once.
 *
 * @throws Interrupted when the work rejected because it was stopped
 */
export async function interruptible<T>(work: (signal: AbortSignal) => Promise<T>): Promise<T> {
  const stop = new AbortController();
  let firstMs = 0;
  const onSignal = (by: Interrupt) => {
    const nowMs = performance.now();
    if (!stop.signal.aborted) {
      firstMs = nowMs;
      stop.abort(new Interrupted(by));
    } else if (nowMs - firstMs > echoMs) process.exit(statusOf[by]);
  };
  for (const by of interrupts) process.on(by, onSignal);
  try {
    return await work(stop.signal);
  } catch (error) {
    // Ctrl-C reaches the decoder too: whatever it says as it goes down, the cause was the user
    throw stop.signal.aborted ? stop.signal.reason : error;
  } finally {
    // once stopped, the handlers stay: a late echo must not end the program before it has said why it stops
    if (!stop.signal.aborted) for (const by of interrupts) process.off(by, onSignal);
  }
}
