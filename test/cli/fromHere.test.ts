import { resolve } from 'node:path';
import { describe, expect, it } from 'vitest';
import { fromHere } from '../../main/cli/fromHere.ts';

const user = resolve('/rig/today');
const checkout = resolve('/tools/tetherfall');
const npm = {
  INIT_CWD: user,
  npm_lifecycle_event: 'reduce',
  npm_package_json: resolve(checkout, 'package.json'),
};

describe('fromHere', () => {
  it("means the working folder's files", () => {
    expect(fromHere('a.json', {}, user)).toBe(resolve(user, 'a.json'));
    expect(fromHere('../a.json', {}, user)).toBe(resolve('/rig/a.json'));
  });

  it('means the folder in which an npm script was started, though it runs in the package', () => {
    expect(fromHere('a.json', npm, checkout)).toBe(resolve(user, 'a.json'));
    expect(fromHere('a.json', { ...npm, npm_package_json: undefined }, checkout)).toBe(
      resolve(user, 'a.json'),
    );
  });

  it('means the working folder of a program that a script started elsewhere, or that npm did not start', () => {
    expect(fromHere('a.json', npm, resolve('/elsewhere'))).toBe(resolve('/elsewhere/a.json'));
    expect(fromHere('a.json', { INIT_CWD: user }, checkout)).toBe(resolve(checkout, 'a.json'));
  });

  it('leaves absolute paths alone', () => {
    expect(fromHere(resolve('/x/a.json'), npm, checkout)).toBe(resolve('/x/a.json'));
  });
});
