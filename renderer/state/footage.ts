import { signal } from '@preact/signals';
import type { FootageEvent, FootageSummary } from '../../main/api/footageEvents.ts';
import type { Progress } from '../../main/jobs/progress.ts';
import { answered, api, isAbort, lineOf, reached } from './api.ts';
import { eventLines } from './eventLines.ts';

export type Footage = FootageSummary;

export interface Opening {
  readonly name: string;
  /** Null while a dropped file is copied. */
  readonly progress: Progress | null;
  readonly cancel: () => void;
}

export const footage = signal<Footage | null>(null);
export const opening = signal<Opening | null>(null);
export const footageProblem = signal<string | null>(null);

/** Why the picture of a reduction from the log is not shown. */
export const footageGone = signal<string | null>(null);

/** The last part of a path of any system. */
export function nameOfPath(path: string): string {
  return path.split(/[\\/]/).at(-1) || path;
}

/**
 * Opens and indexes footage. One at a time: asking for another cancels the one that is being opened.
 *
 * @returns the footage, or null when it was cancelled or refused (then footageProblem has the line)
 */
export async function loadFootage(path: string): Promise<Footage | null> {
  return whileOpening(nameOfPath(path), (signal) => indexed(path, signal));
}

/** As loadFootage, for a file dropped on the window: the program gets a copy of its bytes first. */
export async function loadDropped(file: File): Promise<Footage | null> {
  return whileOpening(file.name, async (signal) => {
    const url = api.footage.dropped.$url({ query: { name: file.name } });
    const { path } = await answered(
      fetch(url, { method: 'POST', body: file, signal }) as Promise<
        Response & { json(): Promise<{ path: string }> }
      >,
    );
    return indexed(path, signal);
  });
}

/** Takes loaded footage as the one that the window shows, and closes the one before. */
export function showFootage(next: Footage | null): void {
  const before = footage.value;
  footage.value = next;
  footageGone.value = null;
  if (before && before.footageId !== next?.footageId)
    void api.footage[':id'].$delete({ param: { id: before.footageId } }).catch(() => undefined); // it is closed at the end anyway
}

async function whileOpening(
  name: string,
  load: (signal: AbortSignal) => Promise<Footage>,
): Promise<Footage | null> {
  opening.value?.cancel();
  const abort = new AbortController();
  const mine: Opening = { name, progress: null, cancel: () => abort.abort() };
  opening.value = mine;
  footageProblem.value = null;
  try {
    return await load(abort.signal);
  } catch (error) {
    if (!isAbort(error)) footageProblem.value = lineOf(error);
    return null;
  } finally {
    if (opening.value?.cancel === mine.cancel) opening.value = null;
  }
}

async function indexed(path: string, signal: AbortSignal): Promise<Footage> {
  const answer = await reached(api.footage.$post({ json: { path } }, { init: { signal } }));
  for await (const event of eventLines<FootageEvent>(answer as unknown as Response)) {
    signal.throwIfAborted();
    if (event.event === 'refused') throw new Error(event.message);
    if (event.event === 'opened') return event;
    if (opening.value) opening.value = { ...opening.value, progress: event };
  }
  throw new Error(`Opening ${path} ended without an answer.`);
}
