import { computed, effect, signal } from '@preact/signals';
import { api, isAbort, lineOf, Refused, refusalLine } from './api.ts';
import { footage } from './footage.ts';

/** One frame as it is shown: luma, one byte per pixel. */
export interface Frame {
  readonly n: number;
  readonly widthPx: number;
  readonly heightPx: number;
  readonly luma: Uint8Array;
}

const mostCachedBytes = 192 * 1024 * 1024;
const mostAtOnce = 3;
const ahead = 6;

export const frameNumber = signal(0);
/** The frame that is on the screen: the one asked for as soon as it is there. */
export const shownFrame = signal<Frame | null>(null);
export const frameProblem = signal<string | null>(null);
export const lastFrame = computed(() => (footage.value?.frameCount ?? 1) - 1);

const cached = new Map<number, Frame>();
const loading = new Map<number, AbortController>();
let cachedId = '';
let direction = 1;

export function goToFrame(n: number): void {
  const next = Math.min(Math.max(Math.round(n), 0), lastFrame.peek());
  if (next !== frameNumber.peek()) direction = next < frameNumber.peek() ? -1 : 1;
  frameNumber.value = next;
}

export function stepFrames(by: number): void {
  goToFrame(frameNumber.peek() + by);
}

export function hasFrame(n: number): boolean {
  return cached.has(n);
}

effect(() => {
  const id = footage.value?.footageId ?? '';
  if (id !== cachedId) forgetAll(id);
  if (id === '') return;
  frameNumber.value; // follow it
  show();
});

function forgetAll(id: string): void {
  for (const abort of loading.values()) abort.abort();
  loading.clear();
  cached.clear();
  cachedId = id;
  shownFrame.value = null;
  frameProblem.value = null;
}

/** Shows what is there and loads what is wanted next; never waits. */
function show(): void {
  const n = frameNumber.peek();
  const frame = cached.get(n);
  if (frame && shownFrame.peek() !== frame) {
    cached.delete(n);
    cached.set(n, frame); // newest last
    shownFrame.value = frame;
    frameProblem.value = null;
  }
  loadMore();
}

/** The frame asked for, then its neighbours in the direction of travel, then the one behind. */
function wanted(): number[] {
  const n = frameNumber.peek();
  const order = [n];
  for (let i = 1; i <= ahead; i++) order.push(n + i * direction);
  order.push(n - direction);
  return order.filter((k) => k >= 0 && k <= lastFrame.peek());
}

function loadMore(): void {
  const order = wanted();
  for (const [n, abort] of loading) if (!order.includes(n)) abort.abort();
  for (const n of order) {
    if (loading.size >= mostAtOnce && n !== order[0]) return;
    if (!cached.has(n) && !loading.has(n)) void load(n);
  }
}

async function load(n: number): Promise<void> {
  const id = cachedId;
  const abort = new AbortController();
  loading.set(n, abort);
  try {
    const answer = await api.footage[':id'].frames[':n'].$get(
      { param: { id, n: String(n) }, query: {} },
      { init: { signal: abort.signal } },
    );
    if (!answer.ok) throw new Refused(await refusalLine(answer as unknown as Response));
    const luma = new Uint8Array(await answer.arrayBuffer());
    if (id !== cachedId) return;
    const widthPx = Number(answer.headers.get('x-width'));
    const heightPx = Number(answer.headers.get('x-height'));
    cached.set(n, { n, widthPx, heightPx, luma });
    dropOldest(widthPx * heightPx);
  } catch (error) {
    if (isAbort(error) || id !== cachedId) return;
    if (n === frameNumber.peek()) frameProblem.value = lineOf(error);
    return;
  } finally {
    if (loading.get(n) === abort) loading.delete(n);
  }
  show();
}

function dropOldest(frameBytes: number): void {
  const most = Math.max(2 * ahead, Math.floor(mostCachedBytes / Math.max(frameBytes, 1)));
  for (const n of cached.keys()) {
    if (cached.size <= most) return;
    cached.delete(n);
  }
}
