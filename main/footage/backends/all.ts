import type { FootageBackend } from '../frameSource.ts';
import { ffmpegOnPath } from './ffmpegOnPath.ts';
import { ffmpegStatic } from './ffmpegStatic.ts';
import { nodeAv } from './nodeAv.ts';

/** The ways to decode that need no setting, in order of preference. A new one is one file of this shape and one entry here. */
export const backends: readonly FootageBackend[] = [ffmpegStatic, ffmpegOnPath, nodeAv];
