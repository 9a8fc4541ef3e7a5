import { beforeAll, describe, expect, it, vi } from 'vitest';
import type { Services } from '../../main/api/services.ts';

type Handler = (request: Request) => Promise<Response> | Response;
type Listener = (...args: unknown[]) => unknown;

/** What stands in for Electron: it records what the desktop app asks of it, in order. */
const fake = vi.hoisted(() => ({
  calls: [] as string[],
  listeners: new Map<string, (...args: unknown[]) => unknown>(),
  schemes: [] as { scheme: string; privileges: Record<string, boolean> }[],
  handlers: new Map<string, (request: Request) => Promise<Response> | Response>(),
  windows: [] as { options: { webPreferences: Record<string, unknown> }; loaded: string; focused: number }[],
  permissions: new Map<string, (...args: unknown[]) => unknown>(),
  ready: () => {},
  exitCode: null as number | null,
}));

vi.mock('electron', () => {
  const isReady = new Promise<void>((resolve) => {
    fake.ready = () => {
      fake.calls.push('ready');
      resolve();
    };
  });
  class BrowserWindow {
    options: { webPreferences: Record<string, unknown> };
    loaded = '';
    focused = 0;
    constructor(options: { webPreferences: Record<string, unknown> }) {
      this.options = options;
      fake.windows.push(this);
    }
    async loadURL(url: string) {
      fake.calls.push('loadURL');
      this.loaded = url;
    }
    isMinimized() {
      return true;
    }
    restore() {
      fake.calls.push('restore');
    }
    focus() {
      this.focused += 1;
    }
  }
  const on = (name: string, listener: Listener) => fake.listeners.set(name, listener);
  return {
    BrowserWindow,
    Menu: { setApplicationMenu: () => fake.calls.push('setApplicationMenu') },
    app: {
      enableSandbox: () => fake.calls.push('enableSandbox'),
      requestSingleInstanceLock: () => {
        fake.calls.push('requestSingleInstanceLock');
        return true;
      },
      whenReady: () => isReady,
      on,
      once: on,
      quit: () => fake.calls.push('quit'),
      exit: (code: number) => {
        fake.exitCode = code;
      },
    },
    dialog: {
      showOpenDialog: async (_window: unknown, options: { filters: { name: string }[] }) =>
        options.filters[0]?.name === 'Sheet'
          ? { canceled: false, filePaths: ['/rig/drop.json'] }
          : { canceled: true, filePaths: [] },
      showSaveDialog: async (_window: unknown, options: { defaultPath: string }) => ({
        canceled: false,
        filePath: `/rig/${options.defaultPath}`,
      }),
    },
    protocol: {
      registerSchemesAsPrivileged: (schemes: typeof fake.schemes) => {
        fake.calls.push('registerSchemesAsPrivileged');
        fake.schemes.push(...schemes);
      },
      handle: (scheme: string, handler: Handler) => {
        fake.calls.push('handle');
        fake.handlers.set(scheme, handler);
      },
    },
    session: {
      defaultSession: {
        setPermissionRequestHandler: (h: Listener) => fake.permissions.set('request', h),
        setPermissionCheckHandler: (h: Listener) => fake.permissions.set('check', h),
        setDevicePermissionHandler: (h: Listener) => fake.permissions.set('device', h),
      },
    },
  };
});

vi.mock('../../main/hosts/services.ts', () => ({
  realServices: (own: Pick<Services, 'host' | 'shell'>) => ({
    ...own,
    program: { name: 'tetherfall', version: '1.2.3', commit: 'abc' },
    logPath: '/data/log.sqlite',
    rendererFolder: '/nowhere',
  }),
}));

beforeAll(async () => {
  await import('../../main/hosts/electron.ts');
  fake.ready();
  await vi.waitFor(() => expect(fake.windows[0]?.loaded).toBe('tetherfall://window/'));
});

/** A request as Electron hands it over: `initiatorOrigin` is the page that sent it, absent for the browser's own. */
function ask(path: string, initiatorOrigin?: string, init: RequestInit = {}): Promise<Response> {
  const handler = fake.handlers.get('tetherfall');
  if (!handler) throw new Error('the scheme is not served');
  const request = new Request(path.startsWith('/') ? `tetherfall://window${path}` : path, init);
  return Promise.resolve(handler(Object.assign(request, { initiatorOrigin })));
}

describe('the scheme', () => {
  it('is registered before the app is ready, and served before the window is loaded', () => {
    const order = ['registerSchemesAsPrivileged', 'ready', 'handle', 'loadURL'].map((c) =>
      fake.calls.indexOf(c),
    );
    expect(order).toEqual([...order].sort((a, b) => a - b));
    expect(order).not.toContain(-1);
  });

  it('has an origin and streams, but no way around the security policy', () => {
    expect(fake.schemes).toEqual([
      {
        scheme: 'tetherfall',
        privileges: { standard: true, secure: true, supportFetchAPI: true, stream: true, codeCache: true },
      },
    ]);
  });

  it('answers the API to our own window', async () => {
    const answer = await ask('/api/program', 'tetherfall://window');
    expect(answer.status).toBe(200);
    expect(await answer.json()).toMatchObject({ host: 'desktop', dialogs: true });
  });

  it.each([
    undefined,
    'null',
    'https://evil.example',
    'tetherfall://other',
    'file://',
    'tetherfall://window.evil',
  ])('refuses the API to %s', async (origin) => {
    expect((await ask('/api/program', origin)).status).toBe(403);
    expect((await ask('/api', origin)).status).toBe(403);
  });

  it('serves the page itself, which the browser asks for on its own, with the security headers', async () => {
    const answer = await ask('/');
    expect(answer.status).toBe(404); // not built here; it is the app that says so
    expect(await answer.text()).toContain('npm run build');
    expect(answer.headers.get('content-security-policy')).toContain("default-src 'none'");
  });

  it('knows one host only', async () => {
    expect((await ask('tetherfall://elsewhere/api/program', 'tetherfall://window')).status).toBe(404);
  });
});

describe('the dialogs', () => {
  const shell = async (path: string, body: unknown) => {
    const headers = { 'content-type': 'application/json' };
    const init = { method: 'POST', headers, body: JSON.stringify(body) };
    return (await ask(path, 'tetherfall://window', init)).json();
  };

  it('give the path that was picked, or null when the user backed out', async () => {
    expect(await shell('/api/shell/open-file', { kind: 'sheet' })).toEqual({ path: '/rig/drop.json' });
    expect(await shell('/api/shell/open-file', { kind: 'footage' })).toEqual({ path: null });
    expect(await shell('/api/shell/save-file', { kind: 'result', suggestedName: 'r.json' })).toEqual({
      path: '/rig/r.json',
    });
  });
});

describe('the window', () => {
  it('is sandboxed and isolated, without Node and without a preload script', () => {
    expect(fake.windows).toHaveLength(1);
    const preferences = fake.windows[0]?.options.webPreferences ?? {};
    expect(preferences).toMatchObject({
      sandbox: true,
      contextIsolation: true,
      nodeIntegration: false,
      nodeIntegrationInWorker: false,
      nodeIntegrationInSubFrames: false,
      webSecurity: true,
      webviewTag: false,
    });
    expect(preferences).not.toHaveProperty('preload');
    expect(fake.calls.indexOf('enableSandbox')).toBeLessThan(fake.calls.indexOf('ready'));
    expect(fake.calls).toContain('enableSandbox');
  });

  it('is granted nothing', () => {
    const answers: unknown[] = [];
    fake.permissions.get('request')?.({}, 'media', (granted: boolean) => answers.push(granted));
    answers.push(fake.permissions.get('check')?.({}, 'clipboard-read'));
    answers.push(fake.permissions.get('device')?.({}));
    expect(answers).toEqual([false, false, false]);
  });

  it('opens no other, goes nowhere else and holds no page of its own', () => {
    const contents = new Map<string, (event: unknown) => void>();
    let openHandler: () => unknown = () => null;
    fake.listeners.get('web-contents-created')?.(
      {},
      {
        setWindowOpenHandler: (handler: () => unknown) => {
          openHandler = handler;
        },
        on: (name: string, listener: (event: unknown) => void) => contents.set(name, listener),
      },
    );
    const prevented = (name: string, url: string) => {
      const preventDefault = vi.fn();
      contents.get(name)?.({ url, preventDefault });
      return preventDefault.mock.calls.length === 1;
    };
    expect(openHandler()).toEqual({ action: 'deny' });
    for (const name of ['will-navigate', 'will-frame-navigate', 'will-redirect']) {
      expect(prevented(name, 'tetherfall://window/#frame=3')).toBe(false);
      for (const url of [
        'https://evil.example/',
        'tetherfall://windowevil/',
        'file:///etc/passwd',
        'no address',
      ])
        expect(prevented(name, url)).toBe(true);
    }
    expect(prevented('will-attach-webview', '')).toBe(true);
  });

  it('comes to the front when the program is started again', () => {
    fake.listeners.get('second-instance')?.();
    expect(fake.calls).toContain('restore');
    expect(fake.windows[0]?.focused).toBe(1);
  });

  it('ends the program when it is closed, after the app has closed what it holds', async () => {
    fake.listeners.get('window-all-closed')?.();
    expect(fake.calls).toContain('quit');
    const preventDefault = vi.fn();
    fake.listeners.get('will-quit')?.({ preventDefault });
    expect(preventDefault).toHaveBeenCalledOnce();
    await expect.poll(() => fake.exitCode).toBe(0);
  });
});
