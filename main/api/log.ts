import { resolve } from 'node:path';
import { Hono } from 'hono';
import { z } from 'zod';
import { checked } from './checked.ts';
import type { LazyLog } from './lazyLog.ts';
import type { ReduceJobs } from './reduceJobs.ts';

const reductionId = z.object({ id: z.string().regex(/^\d{1,15}$/, 'must be a number') });

/** The log. What is saved is the result that this program worked out, never one that a client sends. */
export function logRoutes(log: LazyLog, jobs: ReduceJobs) {
  return new Hono()
    .post('/reductions', checked('json', z.object({ jobId: z.string() })), async (c) => {
      const job = jobs.get(c.req.valid('json').jobId);
      const result = job.result();
      const { sheet, folder } = job.order;
      const footagePath = resolve(folder, sheet.footage.path);
      const opened = await log.get();
      return c.json(await job.saveOnce(() => opened.save({ sheet, result, footagePath })));
    })
    .get('/reductions', async (c) => c.json(await (await log.get()).list()))
    .get('/reductions/:id', checked('param', reductionId), async (c) =>
      c.json(await (await log.get()).get(Number(c.req.valid('param').id))),
    )
    .get('/verify', async (c) => c.json({ fault: await (await log.get()).verify() }));
}
