import { signal } from '@preact/signals';
import { answered, api, lineOf } from './api.ts';

export interface ProgramFacts {
  readonly version: string;
  readonly commit: string;
  readonly host: 'desktop' | 'loopback';
  readonly dialogs: boolean;
  readonly logPath: string;
}

export const program = signal<ProgramFacts | null>(null);
/** Something went wrong that belongs to no part of the window in particular. */
export const windowProblem = signal<string | null>(null);

export async function readProgram(): Promise<void> {
  try {
    program.value = await answered(api.program.$get());
  } catch (error) {
    windowProblem.value = lineOf(error);
  }
}
