import { describe, expect, it, vi } from 'vitest';
import { Refusal, type RefusalStatus } from '../../main/refusal.ts';
import { appWith, errorOf, get, post, request } from './fakeServices.ts';

describe('every answer', () => {
  it.each(['/api/program', '/api/nothing', '/', '/no/such/file.js'])(
    '%s carries the security headers',
    async (path) => {
      const { headers } = await get(appWith({}), path);
      const policy = headers.get('content-security-policy') ?? '';
      expect(policy).toContain("default-src 'none'");
      expect(policy).toContain("script-src 'self';");
      expect(policy).not.toMatch(/unsafe|\*/);
      expect(headers.get('x-content-type-options')).toBe('nosniff');
      expect(headers.get('referrer-policy')).toBe('no-referrer');
      expect(headers.get('cross-origin-opener-policy')).toBe('same-origin');
      expect(headers.get('cross-origin-embedder-policy')).toBe('require-corp');
    },
  );
});

describe('errors', () => {
  const openLog = (error: Error) => appWith({ openLog: () => Promise.reject(error) });

  it.each<[RefusalStatus, number]>([
    [1, 500],
    [2, 400],
    [3, 422],
    [4, 422],
  ])('a refusal of status %i is answered with %i, its code and its line', async (status, http) => {
    const app = openLog(new Refusal('someCode', status, 'What, where, and what to do.'));
    expect(await errorOf(await get(app, '/api/log/reductions'))).toEqual({
      status: http,
      code: 'someCode',
      message: 'What, where, and what to do.',
    });
  });

  it('anything else is one line for the user, and whole on standard error', async () => {
    const log = vi.spyOn(console, 'error').mockImplementation(() => {});
    const defect = new TypeError('x is not a function\nsecond line');
    const error = await errorOf(await get(openLog(defect), '/api/log/reductions'));
    expect(error.status).toBe(500);
    expect(error.code).toBe('unexpected');
    expect(error.message).toContain('x is not a function');
    expect(error.message).not.toContain('\n');
    expect(log).toHaveBeenCalledWith(expect.stringContaining('GET /api/log/reductions'), defect);
    log.mockRestore();
  });

  it('a log that could not be opened is tried again', async () => {
    let attempts = 0;
    const app = appWith({
      openLog: () => Promise.reject(new Refusal('logLocked', 1, `Attempt ${++attempts}.`)),
    });
    for (const n of [1, 2])
      expect((await errorOf(await get(app, '/api/log/reductions'))).message).toBe(`Attempt ${n}.`);
  });

  it('an unknown route is named', async () => {
    const error = await errorOf(await post(appWith({}), '/api/nothing', {}));
    expect(error).toEqual({ status: 404, code: 'routeUnknown', message: 'There is no POST /api/nothing.' });
  });

  it.each([
    ['{', 'application/json', 'Request: the body is not JSON.'],
    ['{"kind":"sheet"}', 'text/plain', 'Request: the body must be sent as application/json.'],
    ['{"kind":"door"}', 'application/json', /^Request: kind: /],
    ['[]', 'application/json', /^Request: json: /],
  ])('the body %s sent as %s is refused', async (body, type, message) => {
    const headers = { 'content-type': type };
    const answer = await request(appWith({}), '/api/shell/open-file', { method: 'POST', body, headers });
    const error = await errorOf(answer);
    expect(error).toMatchObject({ status: 400, code: 'requestWrong' });
    expect(error.message).toMatch(message);
  });
});

describe('GET /api/program', () => {
  it('says which program this is and what its host can do', async () => {
    const answer = await get(appWith({ logPath: '/data/log.sqlite' }), '/api/program');
    expect(await answer.json()).toEqual({
      name: 'tetherfall',
      version: '1.2.3',
      commit: 'abc',
      host: 'loopback',
      dialogs: false,
      logPath: '/data/log.sqlite',
    });
  });
});

describe('/api/shell', () => {
  it('passes on what the host’s dialogs answer', async () => {
    const shell = {
      dialogs: true,
      openFile: async (kind: string) => (kind === 'sheet' ? '/rig/a.json' : null),
      saveFile: async (kind: string, name: string) => `/rig/${kind}-${name}`,
    };
    const app = appWith({ shell });
    const path = async (route: string, body: unknown) => (await post(app, route, body)).json();
    expect(await path('/api/shell/open-file', { kind: 'sheet' })).toEqual({ path: '/rig/a.json' });
    expect(await path('/api/shell/open-file', { kind: 'footage' })).toEqual({ path: null });
    expect(await path('/api/shell/save-file', { kind: 'result', suggestedName: 'r.json' })).toEqual({
      path: '/rig/result-r.json',
    });
  });

  it('is refused where there are none', async () => {
    const error = await errorOf(await post(appWith({}), '/api/shell/open-file', { kind: 'sheet' }));
    expect(error).toMatchObject({ status: 400, code: 'noDialogs' });
  });
});
