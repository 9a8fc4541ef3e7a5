import { dirname, resolve } from 'node:path';

/**
 * A path as the user meant it: relative to the folder in which the command was typed. npm runs a package's scripts in the
 * package's own folder and tells the user's one in INIT_CWD.
 */
export function fromHere(
  path: string,
  env: NodeJS.ProcessEnv = process.env,
  workingFolder: string = process.cwd(),
): string {
  return resolve(typedIn(env, workingFolder), path);
}

function typedIn(env: NodeJS.ProcessEnv, workingFolder: string): string {
  const { INIT_CWD, npm_lifecycle_event, npm_package_json } = env;
  if (INIT_CWD === undefined || npm_lifecycle_event === undefined) return workingFolder;
  // A program that a script starts in yet another folder means that folder.
  const movedByNpm = npm_package_json === undefined || dirname(npm_package_json) === workingFolder;
  return movedByNpm ? INIT_CWD : workingFolder;
}
