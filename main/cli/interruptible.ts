const statusOf = { SIGINT: 130, SIGTERM: 143 } as const;
type Interrupt = keyof typeof statusOf;

/** The user (Ctrl-C) or the system told the program to stop. */
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
  const onSignal = (by: Interrupt) => {
    if (stop.signal.aborted) process.exit(statusOf[by]);
    stop.abort(new Interrupted(by));
  };
  process.on('SIGINT', onSignal);
  process.on('SIGTERM', onSignal);
  try {
    return await work(stop.signal);
  } catch (error) {
    // Ctrl-C reaches the decoder too: whatever it says as it goes down, the cause was the user
    throw stop.signal.aborted ? stop.signal.reason : error;
  } finally {
    process.off('SIGINT', onSignal);
    process.off('SIGTERM', onSignal);
  }
}
