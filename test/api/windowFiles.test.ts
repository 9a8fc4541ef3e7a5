import { mkdirSync, symlinkSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { appWith, get, testFolder } from './fakeServices.ts';

const inside = 'INSIDE';
const outside = 'OUTSIDE';

/** A built window of three files, with secrets beside, above and behind a link. */
function builtWindow(): { app: ReturnType<typeof appWith> } {
  const root = testFolder();
  const rendererFolder = join(root, 'renderer');
  mkdirSync(join(rendererFolder, 'assets'), { recursive: true });
  mkdirSync(join(root, 'renderer-secret'));
  writeFileSync(join(rendererFolder, 'index.html'), inside);
  writeFileSync(join(rendererFolder, 'assets', 'main-a1b2.js'), inside);
  writeFileSync(join(root, 'secret.txt'), outside);
  writeFileSync(join(root, 'renderer-secret', 'secret.txt'), outside);
  symlinkSync(join(root, 'secret.txt'), join(rendererFolder, 'link.txt'));
  symlinkSync(join(root, 'renderer-secret'), join(rendererFolder, 'linked'));
  return { app: appWith({ rendererFolder }) };
}

describe('the files of the window', () => {
  it('are served with their type: the page anew each time, its parts for good', async () => {
    const { app } = builtWindow();
    const page = await get(app, '/');
    expect(await page.text()).toBe(inside);
    expect(page.headers.get('content-type')).toBe('text/html; charset=utf-8');
    expect(page.headers.get('cache-control')).toBe('no-cache');
    const part = await get(app, '/assets/main-a1b2.js');
    expect(part.headers.get('content-type')).toBe('text/javascript; charset=utf-8');
    expect(part.headers.get('cache-control')).toContain('immutable');
  });

  it('say how to build the window where it is missing', async () => {
    const answer = await get(appWith({ rendererFolder: join(testFolder(), 'missing') }), '/');
    expect(answer.status).toBe(404);
    expect(await answer.text()).toContain('npm run build');
  });

  it.each([
    '/../secret.txt',
    '/..%2fsecret.txt',
    '/%2e%2e/secret.txt',
    '/assets/..%2f..%2fsecret.txt',
    '/..%5csecret.txt',
    '/%2e%2e%2frenderer-secret%2fsecret.txt',
    '/link.txt',
    '/linked/secret.txt',
    '/assets',
    '/index.html%00.txt',
    '/%',
    '//secret.txt',
  ])('never lead outside: %s', async (path) => {
    const answer = await get(builtWindow().app, path);
    expect(answer.status).toBe(404);
    expect(await answer.text()).not.toContain(outside);
  });

  it('never lead outside, whatever the address', async () => {
    const { app } = builtWindow();
    const step = fc.constantFrom(
      '..',
      '.',
      '%2e%2e',
      '%2e',
      'assets',
      'linked',
      'renderer',
      'renderer-secret',
      '',
    );
    const between = fc.constantFrom('/', '%2f', '%2F', '%5c', '\\', '//');
    const last = fc.constantFrom('secret.txt', 'link.txt', 'secret.txt%00', 'index.html', 'secret%2etxt');
    const address = fc
      .tuple(fc.array(fc.tuple(step, between), { maxLength: 6 }), last)
      .map(([steps, file]) => `/${steps.flat().join('')}${file}`);
    await fc.assert(
      fc.asyncProperty(address, async (path) => {
        const answer = await get(app, path);
        expect([200, 404]).toContain(answer.status);
        expect(await answer.text()).not.toContain(outside);
      }),
      { numRuns: 400 },
    );
  });
});
