import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { ReductionSummary, SavedReduction } from '../../main/log/log.ts';
import { openLog } from '../../main/log/openLog.ts';
import { allEvents } from './eventLines.ts';
import { appWith, errorOf, get, post, testFolder } from './fakeServices.ts';
import { resultExample } from './resultExample.ts';
import { sheetExample } from './sheetExample.ts';

/** The app on a real log, with a job that is done. */
async function loggedApp() {
  const folder = testFolder();
  const logPath = join(folder, 'log.sqlite');
  const app = appWith({
    logPath,
    openLog,
    reduceInWorker: async (order) => resultExample(order.sheetSha256),
  });
  const reduced = async () => {
    const answer = await post(app, '/api/jobs', { sheet: sheetExample(), folder });
    const { jobId } = (await answer.json()) as { jobId: string };
    await allEvents(await get(app, `/api/jobs/${jobId}/events`));
    return jobId;
  };
  const save = (jobId: string) => post(app, '/api/log/reductions', { jobId });
  const list = async () => (await (await get(app, '/api/log/reductions')).json()) as ReductionSummary[];
  return { app, folder, logPath, reduced, save, list };
}

describe('the log through the API', () => {
  it('is not touched until it is needed', async () => {
    const { app, logPath, reduced } = await loggedApp();
    await get(app, '/api/program');
    await reduced();
    expect(existsSync(logPath)).toBe(false);
  });

  it('keeps what the program worked out, and gives it back', async () => {
    const { app, folder, reduced, save, list } = await loggedApp();
    const summary = (await (await save(await reduced())).json()) as ReductionSummary;
    expect(summary).toMatchObject({
      footagePath: join(folder, 'clip.mp4'),
      footageSha256: 'f'.repeat(64),
      ballG: { value: 9.81, u: 0.01 },
      outcome: 'none',
    });
    expect(await list()).toEqual([summary]);
    const saved = (await (await get(app, `/api/log/reductions/${summary.id}`)).json()) as SavedReduction;
    expect(saved.result).toEqual(resultExample(summary.sheetSha256));
    expect(saved.sheet.bodies).toMatchObject([{ id: 'ball' }]);
    expect(await (await get(app, '/api/log/verify')).json()).toEqual({ fault: null });
  });

  it('keeps a result once, however often it is asked to', async () => {
    const { reduced, save, list } = await loggedApp();
    const jobId = await reduced();
    const answers = await Promise.all([save(jobId), save(jobId)]);
    const ids = await Promise.all(answers.map(async (a) => ((await a.json()) as ReductionSummary).id));
    expect(ids[0]).toBe(ids[1]);
    expect(await list()).toHaveLength(1);
    await save(await reduced());
    expect(await list()).toHaveLength(2);
  });

  it('takes no result from a client', async () => {
    const { app, reduced, list } = await loggedApp();
    const jobId = await reduced();
    const forged = { jobId, result: { ...resultExample('0'), keyValues: [] } };
    const { sheetSha256 } = (await (
      await post(app, '/api/log/reductions', forged)
    ).json()) as ReductionSummary;
    expect(sheetSha256).toMatch(/^[0-9a-f]{64}$/);
    expect((await list())[0]?.ballG).toEqual({ value: 9.81, u: 0.01 });
    expect((await errorOf(await post(app, '/api/log/reductions', { jobId: 'made-up' }))).code).toBe(
      'jobUnknown',
    );
  });

  it('says so when there is no such reduction', async () => {
    const { app } = await loggedApp();
    const error = await errorOf(await get(app, '/api/log/reductions/77'));
    expect(error.status).toBe(400);
    expect(error.message).toContain('77');
    expect((await errorOf(await get(app, '/api/log/reductions/x'))).code).toBe('requestWrong');
  });
});
