import { createInterface } from 'node:readline';
import { answerOrder } from './nodeAvFrames.ts';
import { MESSAGE_HEAD_BYTES, type NodeAvMessage, nodeAvOrderSchema } from './nodeAvMessages.ts';

/**
 * The node-av process: orders on its input, one line each and one after the other; messages with samples on its output. It
 * ends when its parent does, which closes both.
 */
process.stdin.once('end', () => process.exit(0)).once('error', () => process.exit(0));
process.stdout.once('error', () => process.exit(0));

for await (const line of createInterface({ input: process.stdin })) {
  await answerOrder(nodeAvOrderSchema.parse(JSON.parse(line)), send);
}

async function send(message: NodeAvMessage, samples?: Uint8Array): Promise<void> {
  const json = Buffer.from(JSON.stringify(message));
  const head = Buffer.alloc(MESSAGE_HEAD_BYTES);
  head.writeUInt32LE(json.length, 0);
  head.writeUInt32LE(samples?.length ?? 0, 4);
  await write(Buffer.concat([head, json]));
  if (samples !== undefined) await write(samples);
}

/** Resolves when the parent has taken the bytes, so that the samples' buffer may be used again. */
function write(bytes: Uint8Array): Promise<void> {
  return new Promise((resolve, reject) => {
    process.stdout.write(bytes, (error) => (error ? reject(error) : resolve()));
  });
}
