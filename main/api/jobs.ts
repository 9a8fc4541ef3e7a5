import { createHash } from 'node:crypto';
import { isAbsolute } from 'node:path';
import { Hono } from 'hono';
import { z } from 'zod';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import type { Sheet } from '../../analysis/sheet/sheet.ts';
import type { ReduceOrder } from '../jobs/reduce.ts';
import { Refusal } from '../refusal.ts';
import { canonicalJson } from './canonicalJson.ts';
import { checked } from './checked.ts';
import { eventStream } from './eventStream.ts';
import type { JobEvent } from './jobEvents.ts';
import { postedSheet } from './postedSheet.ts';
import type { ReduceJobs } from './reduceJobs.ts';

const jobId = z.object({ id: z.string() });
const order = z.object({
  sheet: postedSheet,
  /** What the sheet's relative paths are relative to; null when it was never in a file: then they must be absolute. */
  folder: z.string().refine(isAbsolute, 'must be an absolute path').nullable(),
});

/** Reduce jobs: asked for, followed, cancelled. */
export function jobRoutes(jobs: ReduceJobs) {
  return new Hono()
    .post('/', checked('json', order), (c) => {
      const { sheet, folder } = c.req.valid('json');
      return c.json({ jobId: jobs.add(reduceOrder(sheet, folder)).id });
    })
    .get('/:id/events', checked('param', jobId), (c) => {
      const job = jobs.get(c.req.valid('param').id);
      return eventStream<JobEvent>((send, signal) => job.follow(send, signal));
    })
    .post('/:id/cancel', checked('param', jobId), (c) => {
      jobs.get(c.req.valid('param').id).cancel();
      return c.body(null, 204);
    });
}

/**
 * A posted sheet has no file whose bytes could be hashed: sheetSha256 is that of the canonical JSON text (RFC 8785) of the sheet
 * as checked, which is the sheet that the log keeps.
 */
function reduceOrder(json: unknown, folder: string | null): ReduceOrder {
  const parsed = parseSheet(json);
  if (!parsed.ok) throw new Refusal('sheetWrong', 2, `Sheet: ${parsed.problems.join('; ')}.`);
  const { sheet, findings } = parsed;
  if (folder === null) refuseRelativePaths(sheet);
  const sheetSha256 = createHash('sha256').update(canonicalJson(sheet)).digest('hex');
  return { sheet, sheetSha256, folder: folder ?? '', findings };
}

function refuseRelativePaths({ footage, clock, loadCell }: Sheet): void {
  const paths = [
    footage.path,
    ...(clock.kind === 'timestamps' ? [clock.path] : []),
    ...(loadCell ? [loadCell.path] : []),
  ];
  const wrong = paths.find((path) => !isAbsolute(path));
  if (wrong !== undefined)
    throw new Refusal(
      'pathRelative',
      2,
      `Path ${wrong} is relative; save the sheet first or give the whole path.`,
    );
}
