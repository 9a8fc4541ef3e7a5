import { reductions } from './001reductions.ts';

/**
 * The log's schema, step by step: migration n takes a log from version n - 1 to n. A step that has been published is never
 * changed; a new one is a new file and one line here.
 */
export const migrations: readonly string[] = [reductions];
