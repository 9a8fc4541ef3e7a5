import { networkInterfaces } from 'node:os';
import { describe, expect, it, onTestFinished } from 'vitest';
import type { App } from '../../main/api/app.ts';
import type { FootageEvent } from '../../main/api/footageEvents.ts';
import { startLoopback } from '../../main/hosts/loopback.ts';
import { eventLines } from '../api/eventLines.ts';
import { fakeFootage } from '../api/fakeFootage.ts';
import { appWith } from '../api/fakeServices.ts';
import { httpRequest } from './httpRequest.ts';

async function started(app: App = appWith({})) {
  const host = await startLoopback({ app });
  onTestFinished(() => host.close());
  const launch = async () => {
    const answer = await httpRequest(host.launchUrl);
    const cookie = answer.headers['set-cookie']?.[0]?.split(';')[0] ?? '';
    return { answer, cookie };
  };
  return { host, launch, api: `${host.url}/api/program` };
}

describe('launching the window', () => {
  it('takes the token for a cookie that no script can read and no other site can send, and leaves no token behind', async () => {
    const { host, launch } = await started();
    expect(host.url).toMatch(/^http:\/\/127\.0\.0\.1:\d+$/);
    // 256 bits are 43 characters of base64url
    expect(new URL(host.launchUrl).searchParams.get('t')).toMatch(/^[\w-]{43}$/);
    expect(host.launched()).toBe(false);
    const { answer } = await launch();
    expect(answer.status).toBe(303);
    expect(answer.headers.location).toBe('/');
    expect(answer.headers['set-cookie']).toEqual([
      expect.stringMatching(/^tetherfall-\d+=[\w-]{43}; Path=\/; HttpOnly; SameSite=Strict$/),
    ]);
    expect(answer.headers['cache-control']).toBe('no-store');
    expect(host.launched()).toBe(true);
  });

  it('works once', async () => {
    const { launch } = await started();
    await launch();
    const { answer, cookie } = await launch();
    expect(answer.status).toBe(403);
    expect(cookie).toBe('');
  });

  it('can be had again by whoever started the program; the address before is void', async () => {
    const { host } = await started();
    const newer = host.newLaunchUrl();
    expect((await httpRequest(host.launchUrl)).status).toBe(403);
    expect((await httpRequest(newer)).status).toBe(303);
  });

  it.each(['', '?t=', '?t=wrong', `?t=${'A'.repeat(43)}`])(
    'is refused to /launch%s, and the token stays good',
    async (query) => {
      const { host, launch } = await started();
      expect((await httpRequest(`${host.url}/launch${query}`)).status).toBe(403);
      expect((await launch()).answer.status).toBe(303);
    },
  );

  it('is not used up by a browser that looks ahead, nor by another page', async () => {
    const { host, launch } = await started();
    expect((await httpRequest(host.launchUrl, { 'sec-purpose': 'prefetch' })).status).toBe(403);
    expect((await httpRequest(host.launchUrl, { 'sec-fetch-site': 'cross-site' })).status).toBe(403);
    expect((await launch()).answer.status).toBe(303);
  });
});

describe('requests', () => {
  it('of the window are answered', async () => {
    const { host, launch, api } = await started();
    const { cookie } = await launch();
    const answer = await httpRequest(api, { cookie, origin: host.url, 'sec-fetch-site': 'same-origin' });
    expect(answer.status).toBe(200);
    expect(JSON.parse(answer.body)).toMatchObject({ name: 'tetherfall', host: 'loopback' });
    expect((await httpRequest(api, { cookie: `other=1; ${cookie}`, 'sec-fetch-site': 'none' })).status).toBe(
      200,
    );
  });

  it.each(['/', '/index.html', '/api/program', '/api/files?folder=/'])(
    'without the cookie are refused: %s',
    async (path) => {
      const { host } = await started();
      const answer = await httpRequest(host.url + path);
      expect(answer.status).toBe(403);
      expect(answer.body).toMatch(/^Open the window by the address/);
      expect(answer.headers['content-security-policy']).toContain("default-src 'none'");
    },
  );

  it('with a wrong cookie, or the cookie of another start, are refused', async () => {
    const { launch, api } = await started();
    const { cookie } = await launch();
    const other = await (await started()).launch();
    const value = cookie.split('=')[1] ?? '';
    const name = cookie.split('=')[0] ?? '';
    const foreign = other.cookie.split('=')[1] ?? '';
    for (const wrong of [
      `${name}=`,
      `${name}=x`,
      `${name}=${foreign}`,
      `${name}=${value}x`,
      `x${cookie}`,
      value,
    ])
      expect((await httpRequest(api, { cookie: wrong })).status).toBe(403);
  });

  it.each(['localhost', 'tetherfall.example', '127.0.0.1.example', '[::1]', '127.1'])(
    'that ask for the host %s are misdirected (421), whatever else is right',
    async (name) => {
      const { host, launch, api } = await started();
      const { cookie } = await launch();
      const { port } = new URL(host.url);
      expect((await httpRequest(api, { cookie, host: `${name}:${port}` })).status).toBe(421);
    },
  );

  it('that ask for another port are misdirected', async () => {
    const { launch, api } = await started();
    const { cookie } = await launch();
    for (const name of ['127.0.0.1', '127.0.0.1:1'])
      expect((await httpRequest(api, { cookie, host: name })).status).toBe(421);
  });

  it.each(['null', 'http://evil.example', 'https://127.0.0.1', 'http://localhost', 'http://127.0.0.1'])(
    'of the origin %s are refused, whatever else is right',
    async (origin) => {
      const { launch, api } = await started();
      const { cookie } = await launch();
      expect((await httpRequest(api, { cookie, origin })).status).toBe(403);
    },
  );

  it.each(['cross-site', 'same-site', 'whatever'])('marked %s by the browser are refused', async (site) => {
    const { launch, api } = await started();
    const { cookie } = await launch();
    expect((await httpRequest(api, { cookie, 'sec-fetch-site': site })).status).toBe(403);
  });

  it('reach nothing from the network: only the loopback address listens', async () => {
    const { host } = await started();
    const outside = Object.values(networkInterfaces())
      .flatMap((addresses) => addresses ?? [])
      .filter((address) => !address.internal && address.family === 'IPv4');
    const { port } = new URL(host.url);
    for (const { address } of [...outside, { address: '127.0.0.2' }])
      await expect(httpRequest(`http://${address}:${port}/`)).rejects.toThrow(/ECONNREFUSED|EADDRNOTAVAIL/);
  });
});

describe('long answers', () => {
  it('come as they are made, and dropping one stops the work behind it', async () => {
    let stopped: () => void = () => {};
    const wasStopped = new Promise<void>((resolve) => {
      stopped = resolve;
    });
    const app = appWith({
      openFootage: async (path) =>
        fakeFootage(path, {
          // The second frame never comes.
          beforeFrame: (n, signal) =>
            n === 0
              ? Promise.resolve()
              : new Promise((_, reject) => {
                  signal?.addEventListener('abort', () => {
                    stopped();
                    reject(signal.reason);
                  });
                }),
        }),
    });
    const { host, launch } = await started(app);
    const { cookie } = await launch();
    const answer = await fetch(`${host.url}/api/footage`, {
      method: 'POST',
      headers: { cookie, 'content-type': 'application/json' },
      body: JSON.stringify({ path: '/rig/clip.mp4' }),
    });
    for await (const event of eventLines<FootageEvent>(answer)) {
      expect(event).toMatchObject({ event: 'progress', framesDone: 1 });
      break;
    }
    await wasStopped;
  });
});

describe('startLoopback', () => {
  it('refuses a port that is taken, in one line', async () => {
    const { host } = await started();
    const port = Number(new URL(host.url).port);
    await expect(startLoopback({ app: appWith({}), port })).rejects.toMatchObject({
      code: 'portNotFree',
      status: 2,
      message: `Port ${port} cannot be used (EADDRINUSE); give another or none.`,
    });
  });

  it('closes with the app, also while an answer is open', async () => {
    let appClosed = false;
    const app: App = {
      handle: async () => new Response(new ReadableStream({ start: (c) => c.enqueue(new Uint8Array(1)) })),
      close: async () => {
        appClosed = true;
      },
    };
    const host = await startLoopback({ app });
    const cookie = (await httpRequest(host.launchUrl)).headers['set-cookie']?.[0]?.split(';')[0] ?? '';
    const answer = await fetch(`${host.url}/x`, { headers: { cookie } });
    await host.close();
    expect(appClosed).toBe(true);
    await expect(answer.text()).rejects.toThrow();
    await expect(fetch(host.url)).rejects.toThrow();
  });
});
