import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import sqlite3 from 'sqlite3';
import { afterEach } from 'vitest';
import type { Log } from '../../main/log/log.ts';
import { openLog } from '../../main/log/openLog.ts';

/** Logs in folders of their own, closed and removed after each test. */
export function logFolder(): {
  path(name?: string): Promise<string>;
  open(path?: string, clock?: () => Date): Promise<Log>;
} {
  const folders: string[] = [];
  const logs: Log[] = [];
  afterEach(async () => {
    for (const log of logs.splice(0)) await log.close();
    for (const folder of folders.splice(0))
      await rm(folder, { recursive: true, force: true, maxRetries: 10 });
  });
  const path = async (name = 'log.sqlite') => {
    const folder = await mkdtemp(join(tmpdir(), 'tetherfall-log-'));
    folders.push(folder);
    return join(folder, name);
  };
  return {
    path,
    async open(at, clock) {
      const log = await openLog(at ?? (await path()), clock);
      logs.push(log);
      return log;
    },
  };
}

/** Another program's hands on the file: a plain connection that knows nothing of the log's rules. */
export async function byHand(path: string, sql: string): Promise<void> {
  const database = await new Promise<sqlite3.Database>((resolve, reject) => {
    const opening = new sqlite3.Database(path, (error) => (error ? reject(error) : resolve(opening)));
  });
  try {
    await new Promise<void>((resolve, reject) =>
      database.exec(sql, (error) => (error ? reject(error) : resolve())),
    );
  } finally {
    await new Promise<void>((resolve) => database.close(() => resolve()));
  }
}
