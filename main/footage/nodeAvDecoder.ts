import { concatScript } from './concatScript.ts';
import type { DecodedFrame, DecodeEnd, DecodeOrder, Decoder, StreamFacts } from './decoder.ts';
import type { FootageInput } from './footageInput.ts';
import { layoutOf } from './layoutOf.ts';
import type { NodeAvMessage, NodeAvOrder } from './nodeAvMessages.ts';
import { NodeAvTalk } from './nodeAvTalk.ts';
import { noVideo } from './noVideo.ts';
import { frameBytes } from './pixelLayout.ts';

let known: string | null = null;

/** The version of the FFmpeg libraries that node-av carries; null where it cannot be used. Never throws. */
export async function nodeAvVersion(): Promise<string | null> {
  if (process.versions.electron !== undefined) return null; // Electron's program does not run scripts as Node does
  known ??= await askVersion();
  return known;
}

async function askVersion(): Promise<string | null> {
  const talk = new NodeAvTalk();
  try {
    talk.ask(nothing);
    const message = await talk.next();
    return message.type === 'version' ? message.version : null;
  } catch {
    return null; // the package is not installed, or its library does not load here
  } finally {
    await talk.kill();
  }
}

/** Decodes with node-av in a process that is kept from one decoding to the next. */
export function nodeAvDecoder(version: string): Decoder {
  let spare: NodeAvTalk | null = null;

  /** Messages of one order, the last one included. A process that was left before its last message is ended. */
  async function* messages(order: NodeAvOrder, signal: AbortSignal, samples?: Uint8Array<ArrayBuffer>) {
    signal.throwIfAborted();
    const talk = spare ?? new NodeAvTalk();
    spare = null;
    let finished = false;
    const onAbort = () => void talk.kill();
    signal.addEventListener('abort', onAbort, { once: true });
    try {
      talk.ask(order);
      while (!finished) {
        const message = await nextUnlessAborted(talk, signal, samples);
        finished = message.type !== 'frame';
        yield message;
      }
    } finally {
      signal.removeEventListener('abort', onAbort);
      if (finished && spare === null && !signal.aborted) spare = talk;
      else await talk.kill();
    }
  }

  async function answer(order: NodeAvOrder, signal: AbortSignal): Promise<NodeAvMessage> {
    let last: NodeAvMessage | null = null;
    for await (const message of messages(order, signal)) last = message;
    if (last === null) throw new Error('node-av gave no answer');
    return last;
  }

  async function describe(input: FootageInput, signal: AbortSignal): Promise<StreamFacts> {
    const message = await answer({ ...reading(input), task: 'describe' }, signal);
    if (message.type === 'facts') return message.facts;
    if (message.type === 'noVideo') throw noVideo(input, message);
    throw new Error(`node-av answered ${message.type} where facts were asked for`);
  }

  async function* decode(order: DecodeOrder): AsyncGenerator<DecodedFrame, DecodeEnd> {
    const { input, facts, from, signal } = order;
    const layout = layoutOf(input, facts);
    const bytes = new Uint8Array(frameBytes(layout, facts.widthPx, facts.heightPx));
    const count = Number.isFinite(order.count) ? order.count : null;
    const expected = facts;
    const task = { ...reading(input), task: 'decode' as const, filter: layout.filter, from, count, expected };
    for await (const message of messages(task, signal, bytes)) {
      if (message.type === 'frame') yield { ...message, bytes };
      else if (message.type === 'end') return message;
    }
    throw new Error('node-av stopped decoding without saying why');
  }

  async function framesBeforeComplaint({ input, signal }: DecodeOrder): Promise<number> {
    const message = await answer({ ...reading(input), task: 'count' }, signal);
    if (message.type === 'end') return message.beforeComplaint;
    throw new Error(`node-av answered ${message.type} where a count was asked for`);
  }

  async function close(): Promise<void> {
    await spare?.kill();
    spare = null;
  }

  return { name: 'node-av', version, describe, decode, framesBeforeComplaint, close };
}

async function nextUnlessAborted(
  talk: NodeAvTalk,
  signal: AbortSignal,
  samples: Uint8Array<ArrayBuffer> | undefined,
): Promise<NodeAvMessage> {
  try {
    const message = await talk.next(samples);
    signal.throwIfAborted();
    return message;
  } catch (error) {
    signal.throwIfAborted(); // a process that was ended on purpose is no failure
    throw error;
  }
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
