import { readLogLine } from './ffmpegLog.ts';

/** Who speaks while packets are read: containers, input files, parsers in older versions. */
const DEMUXER = /^\[(?:mov,|matroska|avi @|mpegts|mxf|asf|concat|png_pipe|tiff_pipe|NULL|in#)/;

/** A parser or decoder by name and address, as in `[h264 @ 0x37e98f40]`. */
const CODEC = /^\[\w+ @ [^\]]+\]$/;

/**
 * Reads the log of a decoding on one thread (`-threads 1 -debug_ts`) for how many frames can be trusted. Reading and decoding
 * run in threads of their own in newer versions, so the order of lines means something only within each.
 */
export class ComplaintWatch {
  #begun = false;
  #packets = 0;
  #frames = 0;
  #packetsTrusted = Number.POSITIVE_INFINITY;
  #framesTrusted = Number.POSITIVE_INFINITY;
  /** By codec context, in order: how far reading and decoding were at its first complaint. */
  readonly #codecs = new Map<string, { packets: number; frames: number }>();

  see(text: string): void {
    const line = readLogLine(text);
    // what is complained of while the file is looked at comes again while it is decoded
    this.#begun ||= text.includes('[info] Stream mapping:');
    if (line.kind === 'demuxed') this.#packets++;
    if (line.kind === 'decoded') this.#frames++;
    if (line.kind !== 'complaint' || !this.#begun) return;
    if (DEMUXER.test(line.origin) || /corrupt input packet/.test(line.text)) {
      this.#packetsTrusted = Math.min(this.#packetsTrusted, this.#packets);
    } else if (!CODEC.test(line.origin)) {
      this.#framesTrusted = Math.min(this.#framesTrusted, this.#frames);
    } else if (!this.#codecs.has(line.origin)) {
      this.#codecs.set(line.origin, { packets: this.#packets, frames: this.#frames });
    }
  }

  /** Frames that came out before the decoder's first complaint, and no more than packets before the demuxer's. */
  trustedFrames(): number {
    const codecs = [...this.#codecs.values()];
    // a parser bears its decoder's name, and meets the same bytes before it
    const parser = codecs.length > 1 ? codecs.shift() : undefined;
    const packets = Math.min(this.#packetsTrusted, parser?.packets ?? Number.POSITIVE_INFINITY);
    const frames = Math.min(this.#framesTrusted, ...codecs.map((codec) => codec.frames));
    return Math.min(packets, frames, this.#frames);
  }
}
