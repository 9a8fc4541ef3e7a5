import { once } from 'node:events';
import { createInterface } from 'node:readline';
import { answerOrder } from './nodeAvFrames.ts';
import { MESSAGE_HEAD_BYTES, nodeAvOrderSchema } from './nodeAvMessages.ts';

/** The node-av process: one order on its input, messages with samples on its output. It ends when its parent does. */
process.stdin.once('end', () => process.exit(0)).once('error', () => process.exit(0));
process.stdout.once('error', () => process.exit(0));

const [line] = await once(createInterface({ input: process.stdin }), 'line');
await answerOrder(nodeAvOrderSchema.parse(JSON.parse(String(line))), async (message, samples) => {
  const json = Buffer.from(JSON.stringify(message));
  const head = Buffer.alloc(MESSAGE_HEAD_BYTES);
  head.writeUInt32LE(json.length, 0);
  head.writeUInt32LE(samples?.length ?? 0, 4);
  await write(Buffer.concat([head, json]));
  if (samples !== undefined) await write(samples);
});
process.exit(0);

/** Resolves when the parent has taken the bytes, so that the samples' buffer may be used again. */
function write(bytes: Uint8Array): Promise<void> {
  return new Promise((resolve, reject) => {
    process.stdout.write(bytes, (error) => (error ? reject(error) : resolve()));
  });
}
