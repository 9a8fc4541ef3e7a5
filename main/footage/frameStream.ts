import { Refusal } from '../refusal.ts';
import type { DecodeOrder, Decoder, StreamFacts } from './decoder.ts';
import type { FootageInput } from './footageInput.ts';
import type { FootageIndex, NumberedPicture } from './frameSource.ts';
import { lumaHash } from './hashes.ts';
import { layoutOf } from './layoutOf.ts';
import { pictureMaker } from './pictureMaker.ts';
import { firstNotIncreasing } from './timestamps.ts';

export interface StreamOrder {
  readonly name: string;
  readonly decoder: Decoder;
  readonly input: FootageInput;
  readonly facts: StreamFacts;
  readonly index: FootageIndex | null;
  readonly first: number;
  /** Infinity: to the end. */
  readonly last: number;
  readonly signal: AbortSignal;
}

/**
 * Frames in order. With an index it seeks, and holds every frame against the index's hash: where a seek went astray (open
 * groups of pictures, wrong times), it decodes again from the start. So a frame is exact or there is an error.
 *
 * @throws Refusal (status 3) where the footage ends before the last frame asked for
 */
export async function* frameStream(order: StreamOrder): AsyncGenerator<NumberedPicture, void> {
  const { index } = order;
  let next = order.first;
  if (index !== null && order.first > 0 && canSeek(order.input, index)) {
    for await (const frame of decodeFrom(order, next, { pts: index.pts[next] ?? 0 })) {
      if (lumaHash(frame.picture.luma) !== index.frameHashes[frame.n]) break;
      yield frame;
      next = frame.n + 1;
    }
  }
  if (next <= endOf(order)) {
    for await (const frame of decodeFrom(order, next, { frame: next })) {
      yield frame;
      next = frame.n + 1;
    }
  }
  if (Number.isFinite(order.last) && next <= order.last) {
    const end = next > order.first ? `ends with frame ${next - 1}` : `ends before frame ${next}`;
    const message = `${order.name}: there is no frame ${order.last}; the footage ${end}`;
    throw new Refusal('frameBeyondFootage', 3, message);
  }
}

/** Frames after the first error are never handed on once the index knows of it. */
function endOf({ index, last }: StreamOrder): number {
  return index === null ? last : Math.min(last, index.frameCount - 1);
}

function canSeek(input: FootageInput, index: FootageIndex): boolean {
  return input.kind === 'file' && !index.pts.includes(null) && firstNotIncreasing(index.pts) === null;
}

async function* decodeFrom(
  order: StreamOrder,
  first: number,
  from: DecodeOrder['from'],
): AsyncGenerator<NumberedPicture, void> {
  const { decoder, input, facts, signal } = order;
  const toPicture = pictureMaker(layoutOf(input, facts), facts);
  const count = endOf(order) - first + 1;
  let n = first;
  for await (const { bytes } of decoder.decode({ input, facts, from, count, signal })) {
    yield { n: n++, picture: toPicture(bytes) };
  }
}
