import { execFileSync } from 'node:child_process';
import { defineConfig } from 'vite';

function commit(): string {
  try {
    return execFileSync('git', ['rev-parse', '--short=12', 'HEAD'], {
      encoding: 'utf8',
      stdio: ['ignore', 'pipe', 'ignore'],
    }).trim();
  } catch {
    return 'unknown'; // built from a source archive
  }
}

/** Everything that runs in Node or in Electron's main process, one file per entry, flat in dist/main. */
export default defineConfig({
  define: { __COMMIT__: JSON.stringify(commit()) },
  build: {
    ssr: true,
    outDir: 'dist/main',
    emptyOutDir: true,
    target: 'node20',
    rollupOptions: {
      input: {
        tetherfall: 'main/cli/tetherfall.ts',
        start: 'main/hosts/start.ts',
        electron: 'main/hosts/electron.ts',
        reduceWorker: 'main/jobs/reduceWorker.ts',
        nodeAvProcess: 'main/footage/nodeAvProcess.ts',
      },
      external: ['electron', 'ffmpeg-static', 'node-av'],
      output: { entryFileNames: '[name].js', chunkFileNames: '[name]-[hash].js' },
    },
  },
});
