import { execFileSync } from 'node:child_process';
import type { Result } from '../analysis/sheet/result.ts';
import manifest from '../package.json' with { type: 'json' };

declare const __COMMIT__: string | undefined; // set by vite.main.config.ts

function commit(): string {
  if (typeof __COMMIT__ === 'string') return __COMMIT__;
  try {
    const head = execFileSync('git', ['rev-parse', '--short=12', 'HEAD'], {
      cwd: import.meta.dirname,
      encoding: 'utf8',
      stdio: ['ignore', 'pipe', 'ignore'],
    });
    return head.trim();
  } catch {
    return 'unknown'; // no git, or not a checkout
  }
}

/** Which program made a result. */
export const program: Result['program'] = { name: 'tetherfall', version: manifest.version, commit: commit() };
