import { openConnection } from '../../main/log/connection.ts';

// A process of its own that stands still in the middle of a transaction until it is killed: stopInTransaction.ts LOG
const connection = await openConnection(process.argv[2] as string);
await connection.write(async (tx) => {
  // 40 MB: far more than SQLite's page cache (2 MB), so that unfinished pages are on the disk
  await tx.script('CREATE TABLE unfinished (x BLOB) STRICT');
  for (let n = 0; n < 40; n++) await tx.run('INSERT INTO unfinished VALUES (randomblob(1000000))');
  process.stdout.write('in the middle\n');
  await new Promise(() => setInterval(() => {}, 1000));
});
