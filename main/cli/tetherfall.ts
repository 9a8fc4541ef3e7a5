#!/usr/bin/env node
import { commandLine } from './commandLine.ts';
import { tell } from './tell.ts';

// `tetherfall list | head` ends our output early: that is no error.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(0);
  throw error;
});
process.on('uncaughtException', (error) => process.exit(tell(error)));

const status = await commandLine(process.argv.slice(2));
// Stopped by a signal: do not wait for work that cannot be called back (making the demo's footage).
if (status > 128) process.exit(status);
process.exitCode = status;
