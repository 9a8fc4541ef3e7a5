import { Hono } from 'hono';
import { z } from 'zod';
import { Refusal } from '../refusal.ts';
import { checked } from './checked.ts';
import type { Services } from './services.ts';

const openFile = z.object({ kind: z.enum(['footage', 'sheet']) });
const saveFile = z.object({
  kind: z.enum(['sheet', 'result']),
  suggestedName: z.string().min(1).max(200),
});

/** The host's own dialogs. A path of null: the user backed out. */
export function shellRoutes({ shell }: Services) {
  const refuseWithoutDialogs = () => {
    if (!shell.dialogs)
      throw new Refusal(
        'noDialogs',
        2,
        'This host has no file dialogs; pick the file in the list of folders instead.',
      );
  };
  return new Hono()
    .post('/open-file', checked('json', openFile), async (c) => {
      refuseWithoutDialogs();
      return c.json({ path: await shell.openFile(c.req.valid('json').kind) });
    })
    .post('/save-file', checked('json', saveFile), async (c) => {
      refuseWithoutDialogs();
      const { kind, suggestedName } = c.req.valid('json');
      return c.json({ path: await shell.saveFile(kind, suggestedName) });
    });
}
