import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { encode } from '../../fixtures/encode.ts';
import { entryPoint } from '../../main/entryPoint.ts';
import { nodeAv } from '../../main/footage/backends/nodeAv.ts';
import type { NodeAvOrder } from '../../main/footage/nodeAvMessages.ts';
import { patterns } from './pattern.ts';
import { temporaryFolder } from './temporaryFolder.ts';

const folder = temporaryFolder();

function start() {
  const caller = new URL('../../main/footage/nodeAvTalk.ts', import.meta.url).href;
  const { url, execArgv } = entryPoint('nodeAvProcess', caller);
  return spawn(process.execPath, [...execArgv, fileURLToPath(url)], { stdio: ['pipe', 'pipe', 'ignore'] });
}

describe('the node-av process', () => {
  it('ends when its parent dies, idle or in the middle of a decoding that nobody reads', async () => {
    const idle = start();
    idle.stdin.end(); // what the system does to a dead parent's pipes
    expect((await once(idle, 'exit'))[1]).toBeNull();

    const path = folder.in('grey.avi');
    await encode(patterns(20, 640, 480), path, { kind: 'rawGrey' }, { playRateHz: 250 });
    const order: NodeAvOrder = {
      task: 'decode',
      url: `file:${path}`,
      script: '',
      filter: 'format=gray',
      from: { frame: 0 },
      count: null,
      expected: null,
    };
    const busy = start();
    busy.stdin.write(`${JSON.stringify(order)}\n`);
    await once(busy.stdout, 'readable'); // six megabytes come, and the pipe holds far less
    busy.stdin.destroy();
    busy.stdout.destroy();
    expect((await once(busy, 'exit'))[1]).toBeNull();
  });

  it('is never started in Electron, whose program runs no scripts', async () => {
    const asElectron = { ...process.versions, electron: '45.0.0' };
    const before = Object.getOwnPropertyDescriptor(process, 'versions');
    Object.defineProperty(process, 'versions', { ...before, value: asElectron });
    try {
      expect(await nodeAv.probe()).toBeNull();
    } finally {
      Object.defineProperty(process, 'versions', before ?? {});
    }
  });
});
