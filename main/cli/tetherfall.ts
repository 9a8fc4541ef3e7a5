#!/usr/bin/env node
import { commandLine } from './commandLine.ts';
import { tell } from './tell.ts';

// `tetherfall list | head` ends our output early: that is no error.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(0);
  throw error;
});
process.on('uncaughtException', (error) => process.exit(tell(error)));

process.exitCode = await commandLine(process.argv.slice(2));
