import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';
import { type App, makeApp } from '../../main/api/app.ts';
import type { Services } from '../../main/api/services.ts';
import { headlessShell } from '../../main/hosts/headlessShell.ts';

/** A folder that is gone when the test has finished. */
export function testFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'tetherfall-api-'));
  onTestFinished(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

function unasked(what: string) {
  return () => Promise.reject(new Error(`${what} was not expected in this test`));
}

/** The app on services that a test gives; what it does not give must not be asked for. */
export function appWith(services: Partial<Services>): App {
  const app = makeApp({
    program: { name: 'tetherfall', version: '1.2.3', commit: 'abc' },
    host: 'loopback',
    shell: headlessShell,
    openFootage: unasked('openFootage'),
    reduceInWorker: unasked('reduceInWorker'),
    openLog: unasked('openLog'),
    logPath: '/nowhere/log.sqlite',
    dataFolder: '/nowhere',
    homeFolder: '/nowhere',
    rendererFolder: '/nowhere',
    ...services,
  });
  onTestFinished(() => app.close());
  return app;
}

const origin = 'http://window.test';

export function get(app: App, path: string): Promise<Response> {
  return app.handle(new Request(origin + path));
}

export function post(app: App, path: string, body: unknown): Promise<Response> {
  const headers = { 'content-type': 'application/json' };
  return app.handle(new Request(origin + path, { method: 'POST', headers, body: JSON.stringify(body) }));
}

export function request(app: App, path: string, init: RequestInit & { duplex?: 'half' }): Promise<Response> {
  return app.handle(new Request(origin + path, init));
}

/** The error of an answer that is one. */
export async function errorOf(answer: Response): Promise<{ status: number; code: string; message: string }> {
  const { error } = (await answer.json()) as { error: { code: string; message: string } };
  return { status: answer.status, ...error };
}
