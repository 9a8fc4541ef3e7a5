import type { Context, MiddlewareHandler } from 'hono';
import type { z } from 'zod';
import { Refusal } from '../refusal.ts';

type Place = 'json' | 'query' | 'param';

/**
 * Parses one part of a request with a zod schema; what a route then gets from `c.req.valid(place)` is trusted.
 *
 * @throws Refusal (status 2) with one line that names the first wrong field
 */
export function checked<P extends Place, S extends z.ZodType<object>>(
  place: P,
  schema: S,
): MiddlewareHandler<
  Record<never, never>,
  string,
  { in: { [K in P]: z.input<S> }; out: { [K in P]: z.output<S> } }
> {
  return async (c, next) => {
    const parsed = schema.safeParse(await read(place, c));
    if (!parsed.success) {
      const issue = parsed.error.issues[0];
      const where = issue && issue.path.length > 0 ? issue.path.join('.') : place;
      throw new Refusal('requestWrong', 2, `Request: ${where}: ${issue?.message ?? 'not as expected'}.`);
    }
    c.req.addValidatedData(place, parsed.data);
    await next();
  };
}

async function read(place: Place, c: Context): Promise<unknown> {
  if (place === 'query') return c.req.query();
  if (place === 'param') return c.req.param();
  // A page of another origin cannot send this type without asking first.
  if (!/^application\/json\b/i.test(c.req.header('content-type') ?? ''))
    throw new Refusal('requestWrong', 2, 'Request: the body must be sent as application/json.');
  try {
    return await c.req.json();
  } catch (error) {
    throw new Refusal('requestWrong', 2, 'Request: the body is not JSON.', { cause: error });
  }
}
