import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { electronBinary } from '../../main/hosts/electronBinary.ts';
import { startOptions } from '../../main/hosts/startOptions.ts';

describe('startOptions', () => {
  it('has a default for each', () => {
    expect(startOptions([])).toEqual({ port: undefined, browser: true, log: undefined, help: false });
  });

  it('takes what is given', () => {
    expect(startOptions(['--port', '8437', '--no-browser', '--log', 'a.sqlite'])).toEqual({
      port: 8437,
      browser: false,
      log: 'a.sqlite',
      help: false,
    });
  });

  it.each([
    [['--port', '0'], '--port 0: give a number from 1 to 65535.'],
    [['--port', '8e3'], '--port 8e3: give a number from 1 to 65535.'],
    [['--port', '70000'], '--port 70000: give a number from 1 to 65535.'],
    [['--prot', '80'], /--prot.*See --help\.$/],
    [['clip.mp4'], /clip\.mp4.*See --help\.$/],
  ])('refuses %j in one line', (args, message) => {
    expect(() => startOptions(args)).toThrow(expect.objectContaining({ code: 'commandWrong', status: 2 }));
    expect(() => startOptions(args)).toThrow(message);
  });
});

describe('electronBinary', () => {
  function electronPackage(): string {
    const folder = mkdtempSync(join(tmpdir(), 'tetherfall-electron-'));
    onTestFinished(() => rmSync(folder, { recursive: true, force: true }));
    return folder;
  }

  it('is found where the package’s installer has put it', () => {
    const folder = electronPackage();
    mkdirSync(join(folder, 'dist'));
    writeFileSync(join(folder, 'dist', 'program'), '');
    writeFileSync(join(folder, 'path.txt'), 'program');
    expect(electronBinary(folder, {})).toBe(join(folder, 'dist', 'program'));
  });

  it('is not there before, nor after it was deleted, and is never fetched', () => {
    const folder = electronPackage();
    expect(electronBinary(folder, {})).toBeNull();
    writeFileSync(join(folder, 'path.txt'), 'program');
    expect(electronBinary(folder, {})).toBeNull();
    expect(electronBinary(null, {})).toBeNull();
  });
});
