import type { Context } from 'hono';
import { Refusal } from '../refusal.ts';

/** The body of every answer that is not 2xx. */
export interface ErrorAnswer {
  readonly error: { readonly code: string; readonly message: string };
}

const httpStatus = { 1: 500, 2: 400, 3: 422, 4: 422 } as const;

/**
 * A Refusal is shown as it is. Anything else is a defect of the program: one line for the user, the whole of it on standard
 * error for whoever mends it.
 */
export function errorAnswer(error: Error, c: Context): Response {
  if (error instanceof Refusal) return answer(c, httpStatus[error.status], error.code, error.message);
  return answer(c, 500, 'unexpected', unexpectedMessage(`${c.req.method} ${c.req.path}`, error));
}

/** Logs a defect and gives the line that the user sees. */
export function unexpectedMessage(during: string, error: unknown): string {
  console.error(`tetherfall: unexpected error in ${during}:`, error);
  const what = error instanceof Error ? error.message : String(error);
  return `Unexpected error: ${what.split('\n')[0]}. The program's error output has the details.`;
}

function answer(c: Context, status: 400 | 422 | 500, code: string, message: string): Response {
  return c.json({ error: { code, message } } satisfies ErrorAnswer, status);
}
