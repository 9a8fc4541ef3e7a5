import type { Picture } from '../../analysis/track/track.ts';
import { BlockCache } from './blockCache.ts';
import type { NumberedPicture } from './frameSource.ts';

/** What is needed to read frames by number. */
export interface BlockSource {
  readonly blockFrames: number;
  readonly cacheBytes: number;
  /** How many frames there are; null while nobody knows. */
  frameCount(): number | null;
  /** Frames from a number on, to the end. */
  open(first: number, signal: AbortSignal): AsyncGenerator<NumberedPicture, void>;
}

/** A decoder that filled a block and waits to fill the next. */
interface Ahead {
  next: number;
  readonly frames: AsyncGenerator<NumberedPicture, void>;
  readonly controller: AbortController;
}

/** A block on its way. Each `arrival` resolves when a picture came or the load is over. */
interface Loading {
  readonly block: number;
  readonly pictures: Picture[];
  arrival: Promise<void>;
  arrived: () => void;
  done: Promise<void>;
  cancelled: boolean;
}

/**
 * Single frames by number, by way of whole blocks: decoding one frame between key frames costs as much as its neighbours, which
 * are likely to be asked for next. In the direction of stepping, the next block is loaded before it is needed.
 */
export class BlockReader {
  readonly #source: BlockSource;
  readonly #cache: BlockCache;
  #ahead: Ahead | null = null;
  #loading: Loading | null = null;
  #lastAsked = -1;

  constructor(source: BlockSource) {
    this.#source = source;
    this.#cache = new BlockCache(source.cacheBytes);
  }

  /** A copy of frame n; null where the footage ends before it. */
  async picture(n: number, signal: AbortSignal): Promise<Picture | null> {
    const { blockFrames } = this.#source;
    const block = Math.floor(n / blockFrames);
    const at = n - block * blockFrames;
    for (;;) {
      signal.throwIfAborted();
      const known = this.#cache.get(block);
      const found = (known ?? this.#arrivedOf(block))[at];
      if (found !== undefined) {
        this.#loadAhead(n, block);
        return { ...found, luma: found.luma.slice() };
      }
      if (known !== null) return null;
      if (this.#loading !== null && this.#loading.block !== block) await this.#cancel(this.#loading);
      this.#loading ??= this.#load(block);
      await unlessAborted(this.#loading.arrival, signal);
    }
  }

  async close(): Promise<void> {
    if (this.#loading !== null) await this.#cancel(this.#loading);
    await this.#leave();
    this.#cache.clear();
  }

  #arrivedOf(block: number): readonly Picture[] {
    return this.#loading?.block === block ? this.#loading.pictures : [];
  }

  #loadAhead(n: number, block: number): void {
    const step = n - this.#lastAsked;
    this.#lastAsked = n;
    const { blockFrames } = this.#source;
    if (this.#loading !== null || step === 0 || Math.abs(step) > blockFrames) return;
    const next = block + Math.sign(step);
    const within = next * blockFrames < (this.#source.frameCount() ?? Number.POSITIVE_INFINITY);
    if (next >= 0 && within && !this.#cache.has(next)) this.#loading = this.#load(next);
  }

  #load(block: number): Loading {
    const loading: Loading = {
      block,
      pictures: [],
      arrival: Promise.resolve(),
      arrived: () => {},
      done: Promise.resolve(),
      cancelled: false,
    };
    const nextArrival = () => {
      const arrived = loading.arrived;
      loading.arrival = new Promise((resolve) => {
        loading.arrived = resolve;
      });
      arrived();
    };
    nextArrival();
    const over = async () => {
      try {
        await this.#fill(loading, nextArrival);
      } finally {
        this.#loading = null;
      }
    };
    loading.done = over();
    // whoever waits for a picture learns of the end, good or bad, in the same place
    const waiting = loading.done.catch((error: unknown) => {
      loading.arrival = Promise.reject(error);
      loading.arrival.catch(() => {});
    });
    void waiting.then(() => loading.arrived());
    return loading;
  }

  async #fill(loading: Loading, nextArrival: () => void): Promise<void> {
    const { blockFrames } = this.#source;
    const first = loading.block * blockFrames;
    if (this.#ahead?.next !== first) {
      await this.#leave();
      const controller = new AbortController();
      this.#ahead = { next: first, frames: this.#source.open(first, controller.signal), controller };
    }
    const ahead = this.#ahead;
    try {
      while (loading.pictures.length < blockFrames && !loading.cancelled) {
        const step = await ahead.frames.next();
        if (step.done) break;
        loading.pictures.push({ ...step.value.picture, luma: step.value.picture.luma.slice() });
        nextArrival();
      }
    } catch (error) {
      this.#ahead = null;
      if (loading.cancelled) return;
      throw error;
    }
    if (loading.cancelled) return await this.#leave();
    ahead.next = first + loading.pictures.length;
    this.#cache.put(loading.block, loading.pictures);
  }

  async #cancel(loading: Loading): Promise<void> {
    loading.cancelled = true;
    this.#ahead?.controller.abort();
    await loading.done.catch(() => {}); // nobody waits for this block any more
  }

  async #leave(): Promise<void> {
    const ahead = this.#ahead;
    this.#ahead = null;
    ahead?.controller.abort();
    await ahead?.frames.return();
  }
}

/** Waits for a promise, or throws the signal's reason as soon as it is aborted. */
async function unlessAborted(work: Promise<void>, signal: AbortSignal): Promise<void> {
  let onAbort = () => {};
  const aborted = new Promise<never>((_, reject) => {
    onAbort = () => reject(signal.reason);
    signal.addEventListener('abort', onAbort, { once: true });
  });
  try {
    await Promise.race([work, aborted]);
  } finally {
    signal.removeEventListener('abort', onAbort);
  }
}
