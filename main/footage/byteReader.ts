import type { Readable } from 'node:stream';

/**
 * Reads a pipe in pieces of asked size, copying each byte once. The pipe stands still while nothing is asked for, so the
 * program at its other end waits and memory does not grow.
 */
export class ByteReader {
  readonly #stream: Readable;
  #left: Buffer | null = null;
  #ended = false;
  #failure: Error | null = null;
  #wanted: { target: Uint8Array; filled: number; done: (bytes: number) => void } | null = null;

  constructor(stream: Readable) {
    this.#stream = stream;
    stream.pause();
    stream.on('data', (chunk: Buffer) => this.#take(chunk));
    stream.on('end', () => this.#end());
    stream.on('close', () => this.#end());
    stream.on('error', (error) => {
      this.#failure = error;
      this.#end();
    });
  }

  /**
   * Fills the target from the pipe.
   *
   * @returns how many bytes came: less than the target's length only at the end of the pipe
   */
  read(target: Uint8Array): Promise<number> {
    return new Promise((done) => {
      this.#wanted = { target, filled: 0, done };
      const left = this.#left;
      this.#left = null;
      if (left !== null) this.#take(left);
      if (this.#wanted === null) return;
      if (this.#ended) this.#end();
      else this.#stream.resume();
    });
  }

  /** Why the pipe broke, if it did. */
  get failure(): Error | null {
    return this.#failure;
  }

  #take(chunk: Buffer): void {
    const wanted = this.#wanted;
    if (wanted === null) {
      this.#left = this.#left === null ? chunk : Buffer.concat([this.#left, chunk]);
      return;
    }
    const bytes = Math.min(chunk.length, wanted.target.length - wanted.filled);
    wanted.target.set(bytes === chunk.length ? chunk : chunk.subarray(0, bytes), wanted.filled);
    wanted.filled += bytes;
    if (bytes < chunk.length) this.#left = chunk.subarray(bytes);
    if (wanted.filled < wanted.target.length) return;
    this.#wanted = null;
    this.#stream.pause();
    wanted.done(wanted.filled);
  }

  #end(): void {
    this.#ended = true;
    const wanted = this.#wanted;
    this.#wanted = null;
    wanted?.done(wanted.filled);
  }
}
