import { hc } from 'hono/client';
import type { AppType } from '../../main/api/app.ts';
import type { ErrorAnswer } from '../../main/api/errorAnswer.ts';

/** The one way from the window to the program behind it. */
export const api = hc<AppType>(location.origin).api;

/** What the program refused, in the one line that is shown as it is. */
export class Refused extends Error {}

interface Answer<T> {
  readonly ok: boolean;
  json(): Promise<T>;
}

/** @throws Refused with the program's own line when it said no, or when it cannot be reached */
export async function answered<R extends Answer<unknown>>(
  asked: Promise<R>,
): Promise<Awaited<ReturnType<R['json']>>> {
  const answer = await reached(asked);
  if (!answer.ok) throw new Refused(await refusalLine(answer));
  return (await answer.json()) as Awaited<ReturnType<R['json']>>;
}

/** @throws Refused when the program cannot be reached; an AbortError passes */
export async function reached<R>(asked: Promise<R>): Promise<R> {
  try {
    return await asked;
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw new Refused('The program behind this window does not answer; start Tetherfall again.');
  }
}

export async function refusalLine(answer: Answer<unknown>): Promise<string> {
  const body = (await answer.json().catch(() => null)) as Partial<ErrorAnswer> | null;
  return body?.error?.message ?? 'The program gave an answer that cannot be read.';
}

/** The line to show for anything that was thrown on the way. */
export function lineOf(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}

export function isAbort(error: unknown): boolean {
  return error instanceof DOMException && error.name === 'AbortError';
}
