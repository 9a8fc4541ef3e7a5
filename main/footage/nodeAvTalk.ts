import { fileURLToPath } from 'node:url';
import { entryPoint } from '../entryPoint.ts';
import { ByteReader } from './byteReader.ts';
import { type Child, startChild } from './childProcess.ts';
import { eachLine } from './ffmpegLog.ts';
import {
  MESSAGE_HEAD_BYTES,
  type NodeAvMessage,
  type NodeAvOrder,
  nodeAvMessageSchema,
} from './nodeAvMessages.ts';

/** A running node-av process: orders in, messages out, one order at a time. */
export class NodeAvTalk {
  readonly #child: Child;
  readonly #reader: ByteReader;
  readonly #head = Buffer.alloc(MESSAGE_HEAD_BYTES);
  readonly #errorsRead: Promise<void>;
  #errors = '';

  constructor() {
    const { url, execArgv } = entryPoint('nodeAvProcess', import.meta.url);
    this.#child = startChild(
      process.execPath,
      [...execArgv, fileURLToPath(url)],
      new AbortController().signal,
    );
    this.#errorsRead = eachLine(this.#child.stderr, (line) => {
      this.#errors ||= /Error/.test(line) ? line : '';
    });
    this.#reader = new ByteReader(this.#child.stdout);
  }

  /** The process's input is never ended: its end would tell the process that nobody listens. */
  ask(order: NodeAvOrder): void {
    this.#child.stdin.write(`${JSON.stringify(order)}\n`);
  }

  /** The next message; a frame's samples are put into `samples`. @throws Error where the process ended instead */
  async next(samples = new Uint8Array(0)): Promise<NodeAvMessage> {
    await this.#fill(this.#head);
    const json = Buffer.alloc(this.#head.readUInt32LE(0));
    const sampleBytes = this.#head.readUInt32LE(4);
    await this.#fill(json);
    const message = nodeAvMessageSchema.parse(JSON.parse(json.toString()));
    if (sampleBytes > 0 && sampleBytes !== samples.length) {
      throw new Error(`node-av sent ${sampleBytes} bytes where ${samples.length} were expected`);
    }
    if (sampleBytes > 0) await this.#fill(samples);
    return message;
  }

  async kill(): Promise<void> {
    await this.#child.kill();
  }

  async #fill(target: Uint8Array): Promise<void> {
    if ((await this.#reader.read(target)) === target.length) return;
    await this.#errorsRead;
    const { status } = await this.#child.ended;
    throw new Error(`the node-av process ended with status ${status}: ${this.#errors || 'no message'}`);
  }
}
