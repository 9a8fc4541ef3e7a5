import { homedir } from 'node:os';
import { join } from 'node:path';

/** The user's data folder for Tetherfall, by the custom of each system. It need not exist yet. */
export function dataFolder(
  env: NodeJS.ProcessEnv = process.env,
  platform: NodeJS.Platform = process.platform,
): string {
  if (platform === 'win32') return join(env.APPDATA ?? join(homedir(), 'AppData', 'Roaming'), 'Tetherfall');
  if (platform === 'darwin') return join(homedir(), 'Library', 'Application Support', 'Tetherfall');
  return join(env.XDG_DATA_HOME ?? join(homedir(), '.local', 'share'), 'tetherfall');
}

/** The log's file: what was asked for, else TETHERFALL_LOG, else log.sqlite in the data folder. */
export function logPath(asked: string | undefined, env: NodeJS.ProcessEnv = process.env): string {
  return asked ?? (env.TETHERFALL_LOG || join(dataFolder(env), 'log.sqlite'));
}
