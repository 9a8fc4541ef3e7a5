import type { Picture } from '../../analysis/track/track.ts';

/** Runs of decoded pictures, the least recently used dropped first; never more bytes than allowed. */
export class BlockCache {
  readonly #maxBytes: number;
  readonly #blocks = new Map<number, { pictures: readonly Picture[]; bytes: number }>();
  #bytes = 0;

  constructor(maxBytes: number) {
    this.#maxBytes = maxBytes;
  }

  get bytes(): number {
    return this.#bytes;
  }

  has(block: number): boolean {
    return this.#blocks.has(block);
  }

  get(block: number): readonly Picture[] | null {
    const found = this.#blocks.get(block);
    if (found === undefined) return null;
    this.#blocks.delete(block);
    this.#blocks.set(block, found); // a Map keeps the order of insertion: last is newest
    return found.pictures;
  }

  put(block: number, pictures: readonly Picture[]): void {
    this.#drop(block);
    const bytes = pictures.reduce((sum, picture) => sum + picture.luma.byteLength, 0);
    this.#blocks.set(block, { pictures, bytes });
    this.#bytes += bytes;
    for (const oldest of this.#blocks.keys()) {
      if (this.#bytes <= this.#maxBytes || oldest === block) break;
      this.#drop(oldest);
    }
  }

  clear(): void {
    this.#blocks.clear();
    this.#bytes = 0;
  }

  #drop(block: number): void {
    this.#bytes -= this.#blocks.get(block)?.bytes ?? 0;
    this.#blocks.delete(block);
  }
}
