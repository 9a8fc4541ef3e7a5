import { openDecoded } from '../decodedFootage.ts';
import type { FootageBackend } from '../frameSource.ts';
import { nodeAvDecoder, nodeAvVersion } from '../nodeAvDecoder.ts';

/**
 * The node-av library in a process of its own, so that a crash or its licence stays there. An optional package; in the
 * packaged app, which cannot start Node processes, it is never used.
 */
export const nodeAv: FootageBackend = {
  name: 'node-av',
  probe: nodeAvVersion,
  async open(path) {
    return await openDecoded(path, nodeAvDecoder((await nodeAvVersion()) ?? 'unknown'));
  },
};
