import type { Picture } from '../../analysis/track/track.ts';
import { Refusal } from '../refusal.ts';
import { BlockCache } from './blockCache.ts';
import { buildIndex } from './buildIndex.ts';
import type { Decoder, StreamFacts } from './decoder.ts';
import type { FootageInput } from './footageInput.ts';
import { footageInput } from './footageInput.ts';
import type { FootageIndex, FrameSource, NumberedPicture } from './frameSource.ts';
import { frameStream } from './frameStream.ts';

/** How much decoded footage frame(n) may keep. */
const CACHE_BYTES = 256 << 20;
const BLOCK_BYTES = 40 << 20;
const MOST_FRAMES_IN_BLOCK = 64;

/** Opens footage with a decoder. @throws Refusal (status 3) where there is no video to decode */
export async function openDecoded(path: string, decoder: Decoder): Promise<FrameSource> {
  const input = await footageInput(path);
  try {
    const facts = await decoder.describe(input, new AbortController().signal);
    return new DecodedFootage(path, input, facts, decoder);
  } catch (error) {
    await decoder.close();
    throw error;
  }
}

interface Loading {
  readonly block: number;
  readonly done: Promise<void>;
  readonly controller: AbortController;
}

/** Footage that a decoder reads: everything that does not depend on which decoder. */
class DecodedFootage implements FrameSource {
  readonly path: string;
  readonly backend: { readonly name: string; readonly version: string };
  readonly #input: FootageInput;
  readonly #facts: StreamFacts;
  readonly #decoder: Decoder;
  readonly #life = new AbortController();
  readonly #streams = new Set<AsyncGenerator<NumberedPicture, void>>();
  readonly #cache = new BlockCache(CACHE_BYTES);
  readonly #blockFrames: number;
  #indexing: Promise<FootageIndex> | null = null;
  #index: FootageIndex | null = null;
  /** The decoder that filled the last block, waiting to fill the next. */
  #ahead: { next: number; frames: AsyncGenerator<NumberedPicture, void> } | null = null;
  #loading: Loading | null = null;
  #lastAsked = -1;

  constructor(path: string, input: FootageInput, facts: StreamFacts, decoder: Decoder) {
    this.path = path;
    this.backend = { name: decoder.name, version: decoder.version };
    this.#input = input;
    this.#facts = facts;
    this.#decoder = decoder;
    const bytes = facts.widthPx * facts.heightPx * 2;
    this.#blockFrames = Math.max(1, Math.min(MOST_FRAMES_IN_BLOCK, Math.floor((2 * BLOCK_BYTES) / bytes)));
  }

  index(options: Parameters<FrameSource['index']>[0] = {}): Promise<FootageIndex> {
    this.#indexing ??= this.#buildIndex(options).catch((error: unknown) => {
      this.#indexing = null; // cancelled or failed: may be asked for again
      throw error;
    });
    return this.#indexing;
  }

  async #buildIndex({
    signal,
    onFrame,
  }: NonNullable<Parameters<FrameSource['index']>[0]>): Promise<FootageIndex> {
    const either = this.#lifeOr(signal);
    this.#index = await buildIndex(this.#decoder, this.#input, this.#facts, either, onFrame);
    return this.#index;
  }

  frames(first: number, last: number, signal?: AbortSignal): AsyncGenerator<NumberedPicture, void> {
    const { path } = this;
    const stream = frameStream({
      name: this.#input.name,
      decoder: this.#decoder,
      input: this.#input,
      facts: this.#facts,
      index: this.#index,
      first,
      last,
      signal: this.#lifeOr(signal),
    });
    const streams = this.#streams;
    async function* followed() {
      if (!Number.isInteger(first) || first < 0 || last < first) {
        throw new RangeError(`${path}: frames ${first} to ${last} are no range`);
      }
      try {
        yield* stream;
      } finally {
        streams.delete(generator);
      }
    }
    const generator = followed();
    streams.add(generator);
    return generator;
  }

  async frame(n: number, signal?: AbortSignal): Promise<Picture> {
    if (!Number.isInteger(n) || n < 0) throw new RangeError(`${this.path}: ${n} is no frame number`);
    const block = Math.floor(n / this.#blockFrames);
    if (this.#index !== null && n >= this.#index.frameCount) throw this.#beyond(n, this.#index);
    while (!this.#cache.has(block)) {
      if (this.#loading !== null && this.#loading.block !== block) this.#loading.controller.abort();
      this.#loading ??= this.#load(block);
      await settled(this.#loading, block, this.#lifeOr(signal));
    }
    const pictures = this.#cache.get(block) ?? [];
    const picture = pictures[n - block * this.#blockFrames];
    if (picture === undefined)
      throw this.#beyond(n, await this.index(signal === undefined ? {} : { signal }));
    this.#loadAhead(n, block);
    return { ...picture, luma: picture.luma.slice() };
  }

  async close(): Promise<void> {
    this.#life.abort(new DOMException('the footage was closed', 'AbortError'));
    const ended = [...this.#streams].map((stream) => stream.return().catch(() => {}));
    await Promise.allSettled([...ended, this.#indexing, this.#loading?.done]);
    await this.#decoder.close();
    this.#cache.clear();
  }

  /** Steps forwards or back meet a block that is already there. */
  #loadAhead(n: number, block: number): void {
    const step = n - this.#lastAsked;
    this.#lastAsked = n;
    if (this.#loading !== null || step === 0 || Math.abs(step) > this.#blockFrames) return;
    const next = block + Math.sign(step);
    const within = this.#index === null || next * this.#blockFrames < this.#index.frameCount;
    if (next >= 0 && within && !this.#cache.has(next)) this.#loading = this.#load(next);
  }

  #load(block: number): Loading {
    const controller = new AbortController();
    const done = this.#fill(block, controller.signal).finally(() => {
      this.#loading = null;
    });
    done.catch(() => {}); // a load ahead that fails is met again when its block is asked for
    return { block, done, controller };
  }

  async #fill(block: number, signal: AbortSignal): Promise<void> {
    const first = block * this.#blockFrames;
    if (this.#ahead?.next !== first) {
      await this.#ahead?.frames.return();
      const last = this.#index === null ? Number.POSITIVE_INFINITY : this.#index.frameCount - 1;
      this.#ahead = { next: first, frames: this.frames(first, last) };
    }
    const ahead = this.#ahead;
    const pictures: Picture[] = [];
    while (pictures.length < this.#blockFrames) {
      const step = await ahead.frames.next();
      if (step.done || signal.aborted) break;
      pictures.push({ ...step.value.picture, luma: step.value.picture.luma.slice() });
    }
    if (signal.aborted) {
      this.#ahead = null;
      await ahead.frames.return();
      throw signal.reason;
    }
    ahead.next = first + pictures.length;
    this.#cache.put(block, pictures);
  }

  #beyond(n: number, { frameCount }: FootageIndex): Refusal {
    const message = `${this.path}: there is no frame ${n}; the footage has ${frameCount} frames, from 0 on`;
    return new Refusal('frameBeyondFootage', 3, message);
  }

  #lifeOr(signal: AbortSignal | undefined): AbortSignal {
    return signal === undefined ? this.#life.signal : AbortSignal.any([this.#life.signal, signal]);
  }
}

/** Waits for a load; one that was ended for the sake of another block is no failure. */
async function settled(loading: Loading, block: number, signal: AbortSignal): Promise<void> {
  signal.throwIfAborted();
  const aborted = new Promise<never>((_, reject) => {
    signal.addEventListener('abort', () => reject(signal.reason), { once: true });
  });
  const done = loading.done.catch((error: unknown) => {
    if (!loading.controller.signal.aborted || loading.block === block) throw error;
  });
  await Promise.race([done, aborted]);
}
