import { fileURLToPath } from 'node:url';
import { entryPoint } from '../entryPoint.ts';
import { ByteReader } from './byteReader.ts';
import { type Child, startChild } from './childProcess.ts';
import { concatScript } from './concatScript.ts';
import type { DecodedFrame, DecodeEnd, DecodeOrder, Decoder, StreamFacts } from './decoder.ts';
import { eachLine } from './ffmpegLog.ts';
import type { FootageInput } from './footageInput.ts';
import { layoutOf } from './layoutOf.ts';
import {
  MESSAGE_HEAD_BYTES,
  type NodeAvMessage,
  type NodeAvOrder,
  nodeAvMessageSchema,
} from './nodeAvMessages.ts';
import { noVideo } from './noVideo.ts';
import { frameBytes } from './pixelLayout.ts';

/** The version of the FFmpeg libraries that node-av carries; null where it cannot be used. Never throws. */
export async function nodeAvVersion(): Promise<string | null> {
  if (process.versions.electron !== undefined) return null; // Electron's program does not run scripts as Node does
  const order: NodeAvOrder = { ...nothing, task: 'version' };
  const talk = converse(order, new AbortController().signal);
  try {
    const message = await talk.next();
    return message?.type === 'version' ? message.version : null;
  } catch {
    return null; // the package is not installed, or its library does not load here
  } finally {
    await talk.child.kill();
  }
}

/** Decodes with node-av, one process per decoding. */
export function nodeAvDecoder(version: string): Decoder {
  async function describe(input: FootageInput, signal: AbortSignal): Promise<StreamFacts> {
    const talk = converse({ ...reading(input), task: 'describe' }, signal);
    try {
      const message = await talk.next();
      signal.throwIfAborted();
      if (message?.type === 'facts') return message.facts;
      if (message?.type === 'noVideo') throw noVideo(input, message);
      throw await talk.failure();
    } finally {
      await talk.child.kill();
    }
  }

  async function* decode(order: DecodeOrder): AsyncGenerator<DecodedFrame, DecodeEnd> {
    const { input, facts, signal } = order;
    signal.throwIfAborted();
    const layout = layoutOf(input, facts);
    const talk = converse(
      {
        ...reading(input),
        task: 'decode',
        filter: layout.filter,
        from: order.from,
        count: Number.isFinite(order.count) ? order.count : null,
        expected: facts,
      },
      signal,
    );
    const bytes = new Uint8Array(frameBytes(layout, facts.widthPx, facts.heightPx));
    try {
      for (;;) {
        const message = await talk.next(bytes);
        signal.throwIfAborted();
        if (message?.type === 'frame') yield { ...message, bytes };
        else if (message?.type === 'end') return message;
        else throw await talk.failure();
      }
    } finally {
      await talk.child.kill();
    }
  }

  async function framesBeforeComplaint({ input, signal }: DecodeOrder): Promise<number> {
    const talk = converse({ ...reading(input), task: 'count' }, signal);
    try {
      const message = await talk.next();
      signal.throwIfAborted();
      if (message?.type === 'end') return message.beforeComplaint;
      throw await talk.failure();
    } finally {
      await talk.child.kill();
    }
  }

  return { name: 'node-av', version, describe, decode, framesBeforeComplaint };
}

const nothing: NodeAvOrder = {
  task: 'version',
  url: '',
  script: '',
  filter: '',
  from: { frame: 0 },
  count: null,
  expected: null,
};

function reading(input: FootageInput): NodeAvOrder {
  if (input.kind === 'file') return { ...nothing, url: `file:${input.path}` };
  return { ...nothing, script: concatScript(input.files) };
}

/** Starts the process, gives it an order and reads its messages. */
function converse(order: NodeAvOrder, signal: AbortSignal) {
  const { url, execArgv } = entryPoint('nodeAvProcess', import.meta.url);
  const child: Child = startChild(process.execPath, [...execArgv, fileURLToPath(url)], signal);
  let errors = '';
  const errorsRead = eachLine(child.stderr, (line) => {
    errors ||= /Error/.test(line) ? line : '';
  });
  child.stdin.write(`${JSON.stringify(order)}\n`); // left open: its end tells the process that nobody listens
  const reader = new ByteReader(child.stdout);
  const head = Buffer.alloc(MESSAGE_HEAD_BYTES);
  return {
    child,
    /** The next message; null at the end. A frame's samples are put into `samples`. */
    async next(samples = new Uint8Array(0)): Promise<NodeAvMessage | null> {
      if ((await reader.read(head)) < head.length) return null;
      const json = Buffer.alloc(head.readUInt32LE(0));
      const sampleBytes = head.readUInt32LE(4);
      if ((await reader.read(json)) < json.length) return null;
      const message = nodeAvMessageSchema.parse(JSON.parse(json.toString()));
      if (sampleBytes === 0) return message;
      if (sampleBytes !== samples.length) {
        throw new Error(`node-av sent ${sampleBytes} bytes where ${samples.length} were expected`);
      }
      return (await reader.read(samples)) < samples.length ? null : message;
    },
    async failure(): Promise<Error> {
      await errorsRead;
      const { status } = await child.ended;
      return new Error(`the node-av process ended with status ${status}: ${errors || 'no message'}`);
    },
  };
}
