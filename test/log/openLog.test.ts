import { readFile, symlink, writeFile } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { openConnection } from '../../main/log/connection.ts';
import { migrate } from '../../main/log/migrate.ts';
import { migrations } from '../../main/log/migrations/all.ts';
import { openLog } from '../../main/log/openLog.ts';
import { byHand, logFolder } from './logFolder.ts';
import { ballG, reductionExample } from './reductionExample.ts';

const folder = logFolder();
const verdict = (outcome: 'pass' | 'fail' | 'undecided') =>
  ({ quantity: 'ball.g', outcome, rule: 'guarded', margin: 1, unit: 'm/s2' }) as const;

describe('openLog', () => {
  it('makes the folder and an empty log', async () => {
    const path = join(dirname(await folder.path()), 'a', 'b', 'log.sqlite');
    const log = await folder.open(path);
    expect(log.path).toBe(path);
    expect(await log.list()).toEqual([]);
    expect(await log.verify()).toBeNull();
  });

  it('lists what was saved, the newest first, with the time of the clock that it was given', async () => {
    let day = 1;
    const log = await folder.open(undefined, () => new Date(Date.UTC(2031, 4, day++, 10)));
    await log.save(reductionExample());
    await log.save(
      reductionExample(
        {
          keyValues: [ballG(9.81, 0.012)],
          verdicts: [verdict('pass'), verdict('undecided')],
          findings: [{ level: 'stop', code: 'x', text: 'y' }],
        },
        '/rig/second.mp4',
      ),
    );
    const [second, first] = await log.list();
    expect(first).toMatchObject({
      id: 1,
      savedAt: '2031-05-01T10:00:00.000Z',
      outcome: 'none',
      ballG: null,
      stops: 0,
    });
    expect(second).toMatchObject({
      id: 2,
      savedAt: '2031-05-02T10:00:00.000Z',
      footagePath: '/rig/second.mp4',
      footageSha256: 'f'.repeat(64),
      sheetSha256: 'a'.repeat(64),
      programVersion: '1.2.3',
      outcome: 'undecided',
      ballG: { value: 9.81, u: 0.012 },
      stops: 1,
    });
  });

  it('calls the worst verdict the outcome', async () => {
    const log = await folder.open();
    const outcome = async (...outcomes: ('pass' | 'fail' | 'undecided')[]) =>
      (await log.save(reductionExample({ verdicts: outcomes.map(verdict) }))).outcome;
    expect(await outcome('pass', 'pass')).toBe('pass');
    expect(await outcome('undecided', 'pass', 'fail')).toBe('fail');
    expect(await outcome('pass', 'undecided')).toBe('undecided');
  });

  it('keeps everything when it is opened again', async () => {
    const path = await folder.path();
    const first = await openLog(path);
    const saved = await first.save(reductionExample());
    await first.close();
    expect(await (await folder.open(path)).list()).toEqual([saved]);
  });

  it('refuses a reduction that it does not have', async () => {
    const log = await folder.open();
    await expect(log.get(7)).rejects.toMatchObject({
      name: 'Refusal',
      status: 2,
      message: `Log ${log.path}: there is no reduction 7.`,
    });
  });

  it('refuses to be used after it was closed', async () => {
    const log = await openLog(await folder.path());
    await log.close();
    await log.close();
    await expect(log.list()).rejects.toThrow('closed');
  });

  it('takes no number that JSON cannot hold, and stays usable', async () => {
    const log = await folder.open();
    await expect(log.save(reductionExample({ keyValues: [ballG(Number.NaN, 1)] }))).rejects.toThrow(
      'keyValues[0].value is NaN',
    );
    expect((await log.save(reductionExample())).id).toBe(1);
  });

  it('takes no path that would be stored as another one', async () => {
    const log = await folder.open();
    await expect(log.save(reductionExample({}, '/rig/\ud800.mp4'))).rejects.toThrow('well-formed');
    expect(await log.list()).toEqual([]);
  });
});

describe('a log that cannot be opened', () => {
  const refused = async (path: string) => {
    const error: unknown = await openLog(path).then(
      () => null,
      (e: unknown) => e,
    );
    expect(error).toMatchObject({ name: 'Refusal', status: 1 });
    const { message } = error as Error;
    expect(message).not.toContain('\n');
    expect(message).toContain(path);
    return message;
  };

  it('is in a folder that is a file', async () => {
    const file = await folder.path('file');
    await writeFile(file, 'x');
    expect(await refused(join(file, 'log.sqlite'))).toContain('is a file, not a folder');
    expect(await refused(join(file, 'below', 'log.sqlite'))).toContain('is a file, not a folder');
  });

  it('is in a folder that cannot be made', async () => {
    const link = await folder.path('loose');
    await symlink(join(dirname(link), 'nowhere', 'at', 'all'), link, 'junction'); // stops even an administrator
    expect(await refused(join(link, 'log.sqlite'))).toContain('check');
  });

  it('is a folder', async () => {
    expect(await refused(dirname(await folder.path()))).toContain('cannot be opened');
  });

  it('is not a database, and is left as it was', async () => {
    const path = await folder.path('sheet.json');
    const text = '{"schema": "tetherfall/sheet/1"}'.repeat(100);
    await writeFile(path, text);
    expect(await refused(path)).toContain('not a log');
    expect(await readFile(path, 'utf8')).toBe(text);
  });

  it("is another program's database, and is left as it was", async () => {
    const path = await folder.path();
    await byHand(path, 'CREATE TABLE stock (part TEXT)');
    expect(await refused(path)).toContain("another program's database");
    await byHand(path, 'INSERT INTO stock VALUES (1)'); // still there
    const marked = await folder.path('marked.sqlite');
    await byHand(marked, 'PRAGMA application_id = 77');
    expect(await refused(marked)).toContain("another program's database");
  });

  it('was written by a newer Tetherfall', async () => {
    const path = await folder.path();
    await (await openLog(path)).close();
    await byHand(path, `PRAGMA user_version = ${migrations.length + 1}`);
    expect(await refused(path)).toContain(
      `newer Tetherfall (log version ${migrations.length + 1}, this one knows up to ${migrations.length})`,
    );
  });
});

describe('migrate', () => {
  const versionAt = async (path: string, steps: readonly string[]) => {
    const connection = await openConnection(path);
    try {
      await migrate(connection, path, steps);
      return await connection.read((tx) => tx.all('SELECT user_version FROM pragma_user_version'));
    } finally {
      await connection.close();
    }
  };

  it('walks the list from where the log stands, each step once', async () => {
    const path = await folder.path();
    expect(await versionAt(path, migrations)).toEqual([{ user_version: migrations.length }]);
    const longer = [...migrations, 'CREATE TABLE a (x TEXT) STRICT', 'ALTER TABLE a ADD COLUMN y TEXT'];
    expect(await versionAt(path, longer)).toEqual([{ user_version: longer.length }]);
    expect(await versionAt(path, longer)).toEqual([{ user_version: longer.length }]);
  });

  it('leaves the log as it was when a step fails', async () => {
    const path = await folder.path();
    const log = await openLog(path);
    await log.save(reductionExample());
    await log.close();
    const broken = [...migrations, 'CREATE TABLE a (x TEXT) STRICT', 'SELECT * FROM nowhere'];
    await expect(versionAt(path, broken)).rejects.toThrow('nowhere');
    expect(await versionAt(path, migrations)).toEqual([{ user_version: migrations.length }]);
    expect(await (await folder.open(path)).list()).toHaveLength(1);
  });
});
