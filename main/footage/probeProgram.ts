import { execFile } from 'node:child_process';

/** An ffmpeg program that runs and is new enough. */
export interface ProgramFound {
  readonly path: string;
  readonly version: string;
  /** The options by which it hands on every frame as it is: none dropped, none doubled. */
  readonly passthrough: readonly string[];
}

/** ffmpeg 4.2 is the oldest with every filter and option used here. */
const OLDEST: readonly [number, number] = [4, 2];

/** Starts a program to see whether it is a usable ffmpeg. Never throws; null where it is not. */
export async function probeProgram(path: string): Promise<ProgramFound | null> {
  const version = /^ffmpeg version (\S+)/.exec((await output(path, ['-hide_banner', '-version'])) ?? '')?.[1];
  if (version === undefined || !isNewEnough(version)) return null;
  const help = await output(path, ['-hide_banner', '-h', 'long']);
  if (help === null) return null;
  const passthrough = help.includes('-fps_mode') ? ['-fps_mode', 'passthrough'] : ['-vsync', 'passthrough'];
  return { path, version, passthrough };
}

/** Builds between releases (`N-109…`, `git-2024-…`) carry no number to compare: they are taken as new. */
function isNewEnough(version: string): boolean {
  const parts = /^n?(\d+)\.(\d+)/.exec(version);
  if (parts === null) return true;
  const [major, minor] = [Number(parts[1]), Number(parts[2])];
  return major > OLDEST[0] || (major === OLDEST[0] && minor >= OLDEST[1]);
}

function output(path: string, args: readonly string[]): Promise<string | null> {
  return new Promise((resolve) => {
    execFile(path, args, { windowsHide: true, timeout: 20_000, maxBuffer: 8 << 20 }, (error, stdout) =>
      resolve(error === null ? stdout : null),
    );
  });
}
