import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { type Connection, openConnection } from '../../main/log/connection.ts';
import { byHand, logFolder } from './logFolder.ts';
import { ballG, reductionExample } from './reductionExample.ts';

const folder = logFolder();
const dropTriggers = `
  DROP TRIGGER reductions_are_not_changed;
  DROP TRIGGER reductions_are_not_deleted;
  DROP TRIGGER reductions_are_chained;`;

/** A log of four reductions, after someone's hands were on its file. */
async function tampered(sql: string) {
  const log = await folder.open();
  for (let n = 1; n <= 4; n++) await log.save(reductionExample({ keyValues: [ballG(9.8 + n / 100, 0.01)] }));
  expect(await log.verify()).toBeNull();
  await byHand(log.path, dropTriggers + sql);
  return log;
}

describe('the log is append-only', () => {
  it.each([
    ['UPDATE', "UPDATE reductions SET outcome = 'pass' WHERE id = 2", 'never changed'],
    ['DELETE', 'DELETE FROM reductions WHERE id = 4', 'never deleted'],
    [
      'INSERT that skips a number',
      `INSERT INTO reductions SELECT ${columns('9')} FROM reductions WHERE id = 4`,
      'follow',
    ],
    [
      'INSERT on another row',
      `INSERT INTO reductions SELECT ${columns('5')} FROM reductions WHERE id = 3`,
      'follow',
    ],
    [
      'INSERT OR REPLACE',
      'INSERT OR REPLACE INTO reductions SELECT * FROM reductions WHERE id = 2',
      'follow',
    ],
    ['REPLACE of the last row', 'REPLACE INTO reductions SELECT * FROM reductions WHERE id = 4', 'follow'],
    [
      'upsert',
      'INSERT INTO reductions SELECT * FROM reductions WHERE id = 4 ON CONFLICT (id) DO UPDATE SET stops = 9',
      'follow',
    ],
  ])('stops %s, even from another program', async (_, sql, reason) => {
    const log = await folder.open();
    for (let n = 0; n < 4; n++) await log.save(reductionExample());
    const before = await log.list();
    await expect(byHand(log.path, sql)).rejects.toThrow(reason);
    expect(await log.list()).toEqual(before);
    expect(await log.verify()).toBeNull();
  });
});

/** Every column as it is, but the id. */
function columns(id: string): string {
  return `${id}, saved_at, footage_path, footage_sha256, sheet_sha256, sheet_json_sha256, result_json_sha256,
    program_version, program_commit, outcome, ball_g_mps2, u_ball_g_mps2, stops, previous_hash, hash, sheet_json, result_json`;
}

describe('verify', () => {
  it.each([
    ['a changed summary', "UPDATE reductions SET outcome = 'pass' WHERE id = 2", 2, 'changed'],
    ['a changed number', 'UPDATE reductions SET ball_g_mps2 = 9.80665 WHERE id = 3', 3, 'changed'],
    [
      'a changed time',
      "UPDATE reductions SET saved_at = '2020-01-01T00:00:00.000Z' WHERE id = 4",
      4,
      'changed',
    ],
    [
      'a changed result',
      "UPDATE reductions SET result_json = replace(result_json, '9.82', '9.80') WHERE id = 2",
      2,
      'result',
    ],
    [
      'a changed sheet',
      "UPDATE reductions SET sheet_json = replace(sheet_json, '0.7', '0.8') WHERE id = 1",
      1,
      'sheet',
    ],
    ['a row taken out', 'DELETE FROM reductions WHERE id = 2', 2, 'missing'],
    ['the first row taken out', 'DELETE FROM reductions WHERE id = 1', 1, 'missing'],
    ['a cut-off end', 'DELETE FROM reductions WHERE id >= 3', 3, 'cut off'],
    [
      'a changed link',
      `UPDATE reductions SET previous_hash = '${'0'.repeat(64)}' WHERE id = 3`,
      3,
      'changed',
    ],
  ])('names %s', async (_, sql, id, reason) => {
    const fault = await (await tampered(sql)).verify();
    expect(fault).toMatchObject({ id, reason: expect.stringContaining(reason) });
  });

  it('names the row after one that was replaced with a right hash of its own', async () => {
    const log = await tampered('');
    // the forger makes a row 2 that is sound in itself
    const forged = await folder.open();
    await forged.save(reductionExample({ keyValues: [ballG(9.81, 0.01)] }));
    await forged.save(reductionExample({ keyValues: [ballG(9.9, 0.01)] }));
    await byHand(
      log.path,
      `ATTACH '${forged.path}' AS forged; DELETE FROM reductions WHERE id = 2;
       INSERT INTO reductions SELECT * FROM forged.reductions WHERE id = 2;`,
    );
    expect(await log.verify()).toMatchObject({ id: 2, reason: expect.stringContaining('does not follow') });
  });

  it('works over more rows than are read at once', async () => {
    const log = await folder.open();
    for (let n = 0; n < 45; n++) await log.save(reductionExample());
    expect(await log.verify()).toBeNull();
    await byHand(log.path, `${dropTriggers} UPDATE reductions SET stops = 1 WHERE id = 41`);
    expect((await log.verify())?.id).toBe(41);
  });
});

describe('a reduction that was changed outside the program', () => {
  it('is refused, not shown', async () => {
    const log = await tampered(
      "UPDATE reductions SET result_json = replace(result_json, '9.82', '9.80') WHERE id = 2",
    );
    await expect(log.get(2)).rejects.toMatchObject({
      name: 'Refusal',
      status: 1,
      message: expect.stringContaining('reduction 2 cannot be trusted: it has a result that was changed'),
    });
    expect((await log.get(3)).id).toBe(3);
  });

  it('is refused when its form is not known, though its hash is right', async () => {
    const log = await folder.open();
    const { sheet, result, footagePath } = reductionExample();
    const other = { ...result, schema: 'tetherfall/result/9' } as unknown as typeof result;
    await log.save({ sheet, result: other, footagePath });
    await expect(log.get(1)).rejects.toMatchObject({
      status: 1,
      message: expect.stringContaining('a form that'),
    });
  });
});

describe('the hash of a row', () => {
  it('can be recomputed from the documented text alone', async () => {
    const log = await folder.open(undefined, () => new Date(Date.UTC(2031, 0, 2)));
    const { hash } = await log.save(reductionExample({ keyValues: [ballG(9.81, 0.0125)] }));
    const saved = await log.get(1);
    const sha = (text: string) => createHash('sha256').update(text).digest('hex');
    // written out by hand after the description at hashOfRow, not by its code
    const text =
      `["tetherfall/log/reduction/1",1,"2031-01-02T00:00:00.000Z","/rig/clip.mp4","${'f'.repeat(64)}","${'a'.repeat(64)}",` +
      `"${sha(JSON.stringify(saved.sheet))}","${sha(JSON.stringify(saved.result))}","1.2.3","abc","none",9.81,0.0125,0,"${'0'.repeat(64)}"]`;
    expect(hash).toBe(sha(text));
    expect((await log.save(reductionExample())).hash).not.toBe(hash);
    expect((await log.get(2)).previousHash).toBe(hash);
  });
});

describe('transactions on one connection', () => {
  it("keep one caller's rows out of another's rollback", async () => {
    const connection: Connection = await openConnection(await folder.path());
    try {
      await connection.write((tx) => tx.script('CREATE TABLE t (x TEXT) STRICT'));
      const failing = connection.write(async (tx) => {
        await tx.run("INSERT INTO t VALUES ('lost')");
        await new Promise((resolve) => setImmediate(resolve));
        throw new Error('changed my mind');
      });
      const other = connection.write((tx) => tx.run("INSERT INTO t VALUES ('kept')"));
      await expect(failing).rejects.toThrow('changed my mind');
      await other;
      expect(await connection.read((tx) => tx.all('SELECT x FROM t'))).toEqual([{ x: 'kept' }]);
    } finally {
      await connection.close();
    }
  });

  it.each([[Number.NaN], [Number.POSITIVE_INFINITY], [10n], [undefined], [true], ['\udc00']])(
    'never store %s as something else',
    async (value) => {
      const connection = await openConnection(await folder.path());
      try {
        await connection.write((tx) => tx.script('CREATE TABLE t (x ANY) STRICT'));
        const bad = value as unknown as number;
        await expect(connection.write((tx) => tx.run('INSERT INTO t VALUES (?)', [bad]))).rejects.toThrow(
          TypeError,
        );
        expect(await connection.read((tx) => tx.all('SELECT x FROM t'))).toEqual([]);
      } finally {
        await connection.close();
      }
    },
  );
});
