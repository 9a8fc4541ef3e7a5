import { randomUUID } from 'node:crypto';
import type { FootageIndex, FrameSource } from '../footage/frameSource.ts';
import { Refusal } from '../refusal.ts';

export interface OpenedFootage {
  readonly id: string;
  readonly source: FrameSource;
  readonly index: FootageIndex;
}

/** More than one so that two drops can be compared; few, for each may hold a cache of frames on disk. */
const mostOpen = 4;

/** The footages that the window has open. Each is closed when asked, when newer ones push it out, or at the end. */
export class OpenFootages {
  readonly #opened = new Map<string, OpenedFootage>();

  /** Takes over an indexed source. The oldest is closed when there are too many. */
  async add(source: FrameSource, index: FootageIndex): Promise<OpenedFootage> {
    const oldest = this.#opened.keys().next().value;
    if (this.#opened.size >= mostOpen && oldest !== undefined) await this.close(oldest);
    // Frames are cached by address for good, so an id is never used again, not even after a new start.
    const opened = { id: randomUUID(), source, index };
    this.#opened.set(opened.id, opened);
    return opened;
  }

  /** @throws Refusal (status 2) when it is not open (any more) */
  get(id: string): OpenedFootage {
    const opened = this.#opened.get(id);
    if (!opened)
      throw new Refusal('footageNotOpen', 2, `Footage ${id} is not open (any more); open its file again.`);
    return opened;
  }

  /** Closing what is not open is no error: it may have been pushed out. */
  async close(id: string): Promise<void> {
    const opened = this.#opened.get(id);
    this.#opened.delete(id);
    await opened?.source.close();
  }

  async closeAll(): Promise<void> {
    await Promise.all([...this.#opened.keys()].map((id) => this.close(id)));
  }
}
