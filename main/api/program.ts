import { Hono } from 'hono';
import type { Services } from './services.ts';

/** Which program this is, and what its host can do. */
export function programRoutes(services: Services) {
  return new Hono().get('/', (c) =>
    c.json({
      ...services.program,
      host: services.host,
      dialogs: services.shell.dialogs,
      logPath: services.logPath,
    }),
  );
}
