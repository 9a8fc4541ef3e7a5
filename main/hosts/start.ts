import { Refusal } from '../refusal.ts';
import { electronBinary } from './electronBinary.ts';
import { startDesktop } from './startDesktop.ts';
import { startInBrowser } from './startInBrowser.ts';
import { startOptions, startUsage } from './startOptions.ts';

// `npm start`: the desktop app where Electron is, else the loopback host in an installed browser, else its address.
try {
  const options = startOptions(process.argv.slice(2));
  if (options.help) {
    process.stdout.write(startUsage);
  } else {
    const electron = options.browser && options.port === undefined ? electronBinary() : null;
    process.exitCode = electron ? await startDesktop(electron, options.log) : await startInBrowser(options);
  }
} catch (error) {
  if (!(error instanceof Refusal)) throw error;
  console.error(`tetherfall: ${error.message}`);
  process.exitCode = error.status;
}
