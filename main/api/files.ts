import { Hono } from 'hono';
import { z } from 'zod';
import { checked } from './checked.ts';
import { listFolder } from './listFolder.ts';
import type { Services } from './services.ts';

/** The server-side file browser, for hosts without dialogs. Without a folder: the home folder. */
export function fileRoutes({ homeFolder }: Services) {
  return new Hono().get(
    '/',
    checked('query', z.object({ folder: z.string().min(1).optional() })),
    async (c) => c.json(await listFolder(c.req.valid('query').folder ?? homeFolder, homeFolder)),
  );
}
