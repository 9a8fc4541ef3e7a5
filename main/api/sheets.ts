import { dirname, isAbsolute, resolve } from 'node:path';
import { Hono } from 'hono';
import { z } from 'zod';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import { readSheet } from '../jobs/readSheet.ts';
import { Refusal } from '../refusal.ts';
import { checked } from './checked.ts';
import { postedSheet } from './postedSheet.ts';
import { saveSheet } from './saveSheet.ts';
import { sheetForFolder } from './sheetPaths.ts';

const path = z.string().refine(isAbsolute, 'must be the whole path of a file');
const save = z.object({
  path,
  sheet: postedSheet,
  /** What the sheet's relative paths are relative to now; null when it was never in a file. */
  folder: path.nullable(),
});

/** Sheets: checked as they are filled in, opened from and saved to files. */
export function sheetRoutes() {
  return new Hono()
    .post('/parse', checked('json', z.object({ json: z.unknown() })), (c) => {
      const parsed = parseSheet(c.req.valid('json').json);
      return c.json(
        parsed.ok
          ? { problems: [], findings: [...parsed.findings, ...checkSheet(parsed.sheet)] }
          : { problems: parsed.problems, findings: [] },
      );
    })
    .post('/open', checked('json', z.object({ path })), async (c) => {
      const asked = resolve(c.req.valid('json').path); // without `..`
      const { sheet, folder, findings } = await readSheet(asked);
      return c.json({ sheet, folder, path: asked, findings: [...findings, ...checkSheet(sheet)] });
    })
    .post('/save', checked('json', save), async (c) => {
      const order = c.req.valid('json');
      const parsed = parseSheet(order.sheet);
      if (!parsed.ok)
        throw new Refusal('sheetWrong', 2, `The sheet was not saved: ${parsed.problems.join('; ')}.`);
      const folder = dirname(order.path);
      const sheet = sheetForFolder(parsed.sheet, order.folder, folder);
      await saveSheet(order.path, sheet);
      return c.json({ sheet, folder, path: order.path });
    });
}
