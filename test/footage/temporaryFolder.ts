import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll } from 'vitest';

/** A folder for the tests of one file, removed after them. */
export function temporaryFolder(): { in(name: string): string } {
  let folder = '';
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'tetherfall-footage-'));
  });
  afterAll(async () => {
    await rm(folder, { recursive: true, force: true, maxRetries: 10 });
  });
  return { in: (name) => join(folder, name) };
}
