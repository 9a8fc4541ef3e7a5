import { mkdir, readFile, rm, symlink, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { type Result, resultSchema } from '../../analysis/sheet/result.ts';
import type { ReductionSummary } from '../../main/log/log.ts';
import manifest from '../../package.json' with { type: 'json' };
import { byHand } from '../log/logFolder.ts';
import { tetherfallHere } from './commandHere.ts';
import { tetherfall } from './commandRun.ts';
import { gMps2, smallDropFolder } from './smallDrop.ts';

const folder = smallDropFolder();
const lines = (text: string) => text.trimEnd().split('\n');
const resultIn = async (path: string): Promise<Result> =>
  resultSchema.parse(JSON.parse(await readFile(path, 'utf8')));

describe('tetherfall reduce and log', () => {
  it('writes the result where it was typed, saves it, and finds it again', async () => {
    await folder.sheet('sheet.json', {});
    await mkdir(folder.path('rig'), { recursive: true });
    // typed in rig/, run by npm in the package's folder
    const here = { INIT_CWD: folder.path('rig'), npm_lifecycle_event: 'reduce' };
    const log = { TETHERFALL_LOG: folder.path('kept/log.sqlite') };
    const run = await tetherfall(['reduce', '../sheet.json', '--out', 'r.json', '--quiet'], {
      env: { ...here, ...log },
    });
    expect(run).toMatchObject({ status: 0, stderr: '' });
    const result = await resultIn(folder.path('rig/r.json'));
    const ballG = result.keyValues.find((k) => k.quantity === 'ball.g');
    // the ball of makeMovingBody falls freely with 9.81 m/s²; 3 u as for any measured value
    expect(Math.abs((ballG?.value ?? 0) - gMps2)).toBeLessThan(3 * (ballG?.u ?? 0));
    expect(run.stdout).toContain(`Result  ${folder.path('rig/r.json')}`);
    expect(run.stdout).toContain(`Log     reduction 1 in ${folder.path('kept/log.sqlite')}`);

    const logged = ['--log', folder.path('kept/log.sqlite')];
    const list = await tetherfallHere(['log', 'list', '--json', ...logged]);
    const [summary] = JSON.parse(list.stdout) as ReductionSummary[];
    expect(summary).toMatchObject({
      id: 1,
      footagePath: folder.path('drop.avi'),
      ballG: { value: ballG?.value, u: ballG?.u },
    });
    const table = await tetherfallHere(['log', 'list', ...logged]);
    expect(table.stdout).toMatch(
      /^ {2}1 +\d{4}-\d\d-\d\d \d\d:\d\d +none +\(9\.\d+ ± 0\.\d+\) m\/s² +drop\.avi$/m,
    );
    const show = await tetherfallHere(['log', 'show', '1', ...logged]);
    expect(show.stdout).toContain(summary.hash);
    expect(show.stdout).toMatch(/ball\.g +\(9\.\d+ ± 0\.\d+\) m\/s²/);
    const verify = await tetherfallHere(['log', 'verify', ...logged]);
    expect(verify).toMatchObject({ status: 0, stderr: '' });
    expect(verify.stdout).toContain(`Last hash ${summary.hash}`);
    expect(await tetherfallHere(['log', 'show', '2', ...logged])).toMatchObject({
      status: 2,
      stderr: expect.stringContaining('there is no reduction 2.'),
    });
  });

  it('names the reduction that was changed outside the program, with status 1', async () => {
    const path = folder.path('kept/log.sqlite');
    await byHand(path, "DROP TRIGGER reductions_are_not_changed; UPDATE reductions SET outcome = 'pass'");
    expect(await tetherfallHere(['log', 'verify', '--log', path])).toMatchObject({
      status: 1,
      stdout: '',
      stderr: expect.stringMatching(
        /^tetherfall: Log .*: reduction 1 was changed after it was saved; [^\n]+\n$/,
      ),
    });
  });

  it('tells programs how far it is and how it ended, one JSON object per line', async () => {
    const path = await folder.sheet('sheet.json', {});
    const out = folder.path('events.json');
    const run = await tetherfallHere(['reduce', path, '--out', out, '--no-log', '--json']);
    expect(run).toMatchObject({ status: 0, stderr: '' });
    const events = lines(run.stdout).map((line) => JSON.parse(line) as Record<string, unknown>);
    expect(events.slice(0, -1).every((e) => e.event === 'progress')).toBe(true);
    expect(events.filter((e) => e.phase === 'track').at(-1)).toMatchObject({
      framesDone: 160,
      framesTotal: 160,
    });
    expect(events.at(-1)).toMatchObject({
      event: 'done',
      result: out,
      log: null,
      keyValues: (await resultIn(out)).keyValues,
    });
  });

  it('keeps the result when the log cannot be written, and says that it is not in the log', async () => {
    const path = await folder.sheet('sheet.json', {});
    await writeFile(folder.path('note.txt'), 'not a log, but a text of some length'.repeat(20));
    const out = folder.path('unlogged.json');
    await writeFile(out, JSON.stringify(await resultIn(folder.path('rig/r.json')))); // an older result is replaced
    const run = await tetherfallHere([
      'reduce',
      path,
      '--out',
      out,
      '--log',
      folder.path('note.txt'),
      '--quiet',
    ]);
    expect(run.status).toBe(0);
    expect(lines(run.stderr)).toHaveLength(1);
    expect(run.stderr).toContain('NOT in the log');
    expect(run.stderr).toContain('note.txt: the file is not a log');
    expect((await resultIn(out)).keyValues.length).toBeGreaterThan(0);
  });
});

describe('Ctrl-C', () => {
  it.skipIf(process.platform === 'win32')(
    'stops the work with status 130 and leaves nothing behind',
    async () => {
      const path = await folder.sheet('sheet.json', {});
      const before = await folder.files();
      const run = await tetherfall(['reduce', path, '--out', folder.path('stopped.json'), '--json'], {
        env: { TETHERFALL_LOG: folder.path('stopped.sqlite') },
        onFirstOutput: (child) => child.kill('SIGINT'), // at the first sign of progress
      });
      expect(run.status).toBe(130);
      expect(run.stderr).toBe('tetherfall: Stopped before it was done; there is no result.\n');
      expect(JSON.parse(lines(run.stdout).at(-1) ?? '')).toMatchObject({
        event: 'error',
        code: 'interrupted',
        status: 130,
      });
      expect(await folder.files()).toEqual(before);
    },
  );
});

describe('tetherfall check', () => {
  it('says that a sheet can be reduced, and what it assumes', async () => {
    const path = await folder.sheet('spare.json', { camera: undefined });
    const run = await tetherfallHere(['check', path]);
    expect(run).toMatchObject({ status: 0, stderr: '' });
    expect(run.stdout).toContain('camera.exposureS');
    expect(run.stdout).toContain('It can be reduced.');
  });

  it('gives each problem its own line', async () => {
    const path = await folder.sheet('three.json', {
      footage: { path: 'gone.avi', firstFrame: 9, lastFrame: 3 },
      scale: { bars: [] },
    });
    const run = await tetherfallHere(['check', path]);
    expect(run.status).toBe(2);
    expect(run.stderr).toMatch(
      /^tetherfall: Sheet [^\n]+three\.json cannot be reduced: 4 things stop it[^\n]+\n$/,
    );
    for (const what of [
      'footage.lastFrame (3)',
      'scale: state a scale bar',
      'gone.avi: there is no such file',
      '"ball" is placed in frame 0',
    ])
      expect(run.stdout).toContain(what);
    expect(lines(run.stdout).filter((line) => line.startsWith('  stop'))).toHaveLength(4);
  });

  it('gives each wrong field its own line', async () => {
    const path = await folder.sheet('fields.json', {
      clock: { kind: 'sundial' },
      bodies: [{ id: 'ball', x: 'left' }],
    });
    const run = await tetherfallHere(['check', path]);
    expect(run.status).toBe(2);
    expect(lines(run.stdout).filter((line) => line.startsWith('  stop')).length).toBeGreaterThanOrEqual(3);
    expect(run.stdout).toContain('bodies[0].x');
  });
});

describe('the command itself', () => {
  it.each([
    [[], 'no command given; see tetherfall --help.'],
    [['redcue'], "unknown command 'redcue' (Did you mean reduce?); see tetherfall --help."],
    [['reduce', 'sheet.json'], "required option '--out <result>' not specified; see tetherfall --help."],
    [['log', 'show', 'last'], 'Give a number from the list'],
  ])('tells %j in one line with status 2', async (args, text) => {
    const run = await tetherfallHere(args);
    expect(run).toMatchObject({ status: 2, stdout: '' });
    expect(run.stderr).toMatch(/^tetherfall: [^\n]+\n$/);
    expect(run.stderr).toContain(text);
  });

  it('makes no log by looking for one', async () => {
    const run = await tetherfallHere(['log', 'list', '--log', folder.path('none.sqlite')]);
    expect(run).toMatchObject({ status: 2, stderr: expect.stringContaining('the first reduction makes it') });
    expect(await folder.files()).not.toContain('none.sqlite');
  });

  it('names its version and commit', async () => {
    const run = await tetherfallHere(['--version']);
    expect(run).toMatchObject({ status: 0, stderr: '' });
    expect(run.stdout).toMatch(new RegExp(`^tetherfall ${manifest.version} \\(commit \\w+\\)\n$`));
  });

  it('describes every command', async () => {
    const run = await tetherfallHere(['--help']);
    expect(run.status).toBe(0);
    for (const command of ['reduce', 'check', 'demo', 'log'])
      expect(run.stdout).toMatch(new RegExp(`^ +${command}`, 'm'));
  });
});

describe('tetherfall demo', () => {
  it('leaves a folder with other files alone', async () => {
    const before = await folder.files();
    const run = await tetherfallHere(['demo', '--folder', join(folder.path('x'), '..'), '--quiet']);
    expect(run).toMatchObject({
      status: 2,
      stdout: '',
      stderr: expect.stringContaining('it holds other files'),
    });
    expect(await folder.files()).toEqual(before);
  });

  it('says that its folder cannot be made', async () => {
    const link = folder.path('loose');
    await symlink(folder.path('nowhere/at/all'), link, 'junction'); // stops even an administrator
    const run = await tetherfallHere(['demo', '--folder', link, '--quiet']);
    await rm(link);
    expect(run).toMatchObject({ status: 2, stdout: '' });
    expect(run.stderr).toMatch(/^tetherfall: --folder [^\n]+loose: nothing can be written there [^\n]+\n$/);
  });

  it.skipIf(process.platform === 'win32')(
    'leaves nothing behind when stopped at its very start',
    async () => {
      const before = await folder.files();
      const run = await tetherfall(['demo', '--folder', folder.path('new/demo')], {
        env: { TETHERFALL_LOG: folder.path('demo.sqlite') },
        onFirstOutput: (child) => child.kill('SIGINT'), // the maker of footage is not even loaded
      });
      expect(run.status).toBe(130);
      expect(lines(run.stderr).at(-1)).toBe('tetherfall: Stopped before it was done; there is no result.');
      expect(await folder.files()).toEqual(before);
    },
  );
});
