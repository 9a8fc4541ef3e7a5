import type { Picture } from '../../analysis/track/track.ts';
import { Refusal } from '../refusal.ts';
import { BlockReader } from './blockReader.ts';
import { buildIndex } from './buildIndex.ts';
import type { Decoder, StreamFacts } from './decoder.ts';
import { type FootageInput, footageInput } from './footageInput.ts';
import type { FootageIndex, FrameSource, NumberedPicture } from './frameSource.ts';
import { frameStream } from './frameStream.ts';

/** How much decoded footage frame(n) may keep. */
const CACHE_BYTES = 256 << 20;
/** A block of frames, counted at two bytes per pixel. */
const BLOCK_BYTES = 80 << 20;
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

/** Footage that a decoder reads: everything that does not depend on which decoder. */
class DecodedFootage implements FrameSource {
  readonly path: string;
  readonly backend: { readonly name: string; readonly version: string };
  readonly #input: FootageInput;
  readonly #facts: StreamFacts;
  readonly #decoder: Decoder;
  readonly #life = new AbortController();
  readonly #streams = new Set<AsyncGenerator<NumberedPicture, void>>();
  readonly #blocks: BlockReader;
  #indexing: Promise<FootageIndex> | null = null;
  #index: FootageIndex | null = null;

  constructor(path: string, input: FootageInput, facts: StreamFacts, decoder: Decoder) {
    this.path = path;
    this.backend = { name: decoder.name, version: decoder.version };
    this.#input = input;
    this.#facts = facts;
    this.#decoder = decoder;
    const fit = Math.floor(BLOCK_BYTES / (2 * facts.widthPx * facts.heightPx));
    this.#blocks = new BlockReader({
      blockFrames: Math.max(1, Math.min(MOST_FRAMES_IN_BLOCK, fit)),
      cacheBytes: CACHE_BYTES,
      frameCount: () => this.#index?.frameCount ?? null,
      open: (first, signal) => this.frames(first, Number.POSITIVE_INFINITY, signal),
    });
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
    if (this.#index !== null && n >= this.#index.frameCount) throw this.#beyond(n, this.#index);
    const picture = await this.#blocks.picture(n, this.#lifeOr(signal));
    if (picture !== null) return picture;
    throw this.#beyond(n, await this.index(signal === undefined ? {} : { signal }));
  }

  async close(): Promise<void> {
    this.#life.abort(new DOMException('the footage was closed', 'AbortError'));
    const ended = [...this.#streams].map((stream) => stream.return().catch(() => {}));
    await Promise.allSettled([...ended, this.#indexing, this.#blocks.close()]);
    await this.#decoder.close();
  }

  #beyond(n: number, { frameCount }: FootageIndex): Refusal {
    const message = `${this.path}: there is no frame ${n}; the footage has ${frameCount} frames, from 0 on`;
    return new Refusal('frameBeyondFootage', 3, message);
  }

  #lifeOr(signal: AbortSignal | undefined): AbortSignal {
    return signal === undefined ? this.#life.signal : AbortSignal.any([this.#life.signal, signal]);
  }
}
