import type { StreamFacts } from './decoder.ts';
import { readLogLine } from './ffmpegLog.ts';

/** What the log of a one-frame decoding says about the file. `facts` is null where no frame of a video stream came out. */
export interface LogFacts {
  readonly facts: StreamFacts | null;
  readonly hasVideo: boolean;
  readonly hasOther: boolean;
  readonly complaint: string | null;
}

/** Reads the log that `ffmpeg -i FILE -map 0:V:0 -vf showinfo -frames:v 1` writes. */
export function readFacts(lines: readonly string[]): LogFacts {
  const inputEnds = lines.findIndex((line) => /^\[info\] (?:Stream mapping|Output #0)/.test(line));
  const input = inputEnds < 0 ? lines : lines.slice(0, inputEnds);
  const streams = input.filter((line) => /^\[info\] +Stream #0:\d+/.test(line));
  const videos = streams.filter((line) => line.includes(': Video: ') && !line.includes('(attached pic)'));
  const read = lines.map(readLogLine);
  const complaint = read.find((line) => line.kind === 'complaint')?.text ?? null;
  const frame = read.find((line) => line.kind === 'frame');
  const timeBase = read.find((line) => line.kind === 'timeBase');
  const about = { hasVideo: videos.length > 0, hasOther: streams.length > videos.length, complaint };
  const video = videos[0];
  if (frame === undefined || timeBase === undefined || video === undefined) return { facts: null, ...about };
  return {
    facts: {
      codec: /: Video: (\w+)/.exec(video)?.[1] ?? 'unknown',
      pixelFormat: frame.pixelFormat,
      widthPx: frame.widthPx,
      heightPx: frame.heightPx,
      timeBase: { num: timeBase.num, den: timeBase.den },
      clockwiseDeg: quarterTurn(rotationOf(input, video)),
      videoStreamCount: videos.length,
      ...durationOf(input),
      frameRateHz: frameRateOf(video),
    },
    ...about,
  };
}

/** libavutil's rotation is counter-clockwise: -90 asks for a quarter turn clockwise. */
export function quarterTurn(counterClockwiseDeg: number): StreamFacts['clockwiseDeg'] {
  const deg = (((Math.round(-counterClockwiseDeg) % 360) + 360) % 360) + 0;
  const turn = ([0, 90, 180, 270] as const).find((candidate) => candidate === deg);
  return turn ?? null;
}

/** The display matrix printed under the stream's own line. */
function rotationOf(input: readonly string[], video: string): number {
  for (const line of input.slice(input.indexOf(video) + 1)) {
    if (/^\[info\] +Stream #/.test(line)) return 0;
    const deg = /displaymatrix: rotation of (-?[\d.]+) degrees/.exec(line);
    if (deg !== null) return Number(deg[1]);
  }
  return 0;
}

function durationOf(input: readonly string[]): { startS: number; durationS: number | null } {
  const line = input.find((text) => /^\[info\] +Duration: /.test(text)) ?? '';
  const length = /Duration: (\d+):(\d+):([\d.]+)/.exec(line);
  const start = /start: (-?[\d.]+)/.exec(line);
  return {
    startS: Number(start?.[1] ?? 0),
    durationS: length === null ? null : Number(length[1]) * 3600 + Number(length[2]) * 60 + Number(length[3]),
  };
}

function frameRateOf(video: string): number | null {
  const rate = /, ([\d.]+)(k?) fps/.exec(video);
  return rate === null ? null : Number(rate[1]) * (rate[2] === 'k' ? 1000 : 1);
}
