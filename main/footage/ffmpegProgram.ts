import { ByteReader } from './byteReader.ts';
import { type Child, startChild } from './childProcess.ts';
import { ComplaintWatch } from './complaintWatch.ts';
import { concatScript } from './concatScript.ts';
import type { DecodedFrame, DecodeEnd, DecodeOrder, Decoder, StreamFacts } from './decoder.ts';
import { readFacts } from './ffmpegFacts.ts';
import { eachLine, type LogLine, readLogLine } from './ffmpegLog.ts';
import type { FootageInput } from './footageInput.ts';
import { CHECKS, READABLE_FORMATS } from './formats.ts';
import { layoutOf } from './layoutOf.ts';
import { noVideo } from './noVideo.ts';
import { frameBytes } from './pixelLayout.ts';
import type { ProgramFound } from './probeProgram.ts';

/** Decodes with an ffmpeg program, one process per decoding: raw samples on its output, times in its log. */
export function ffmpegProgram(backendName: string, found: ProgramFound): Decoder {
  const start = (args: readonly string[], input: FootageInput, signal: AbortSignal): Child => {
    const child = startChild(found.path, ['-hide_banner', '-nostats', '-nostdin', ...LOG, ...args], signal);
    child.stdin.end(input.kind === 'stills' ? concatScript(input.files) : undefined);
    return child;
  };

  async function describe(input: FootageInput, signal: AbortSignal): Promise<StreamFacts> {
    const shown = ['-frames:v', '1', '-vf', SHOW, ...found.passthrough, '-f', 'null', '-'];
    const child = start([...reading(input), ...shown], input, signal);
    const lines: string[] = [];
    child.stdout.resume();
    await eachLine(child.stderr, (line) => lines.push(line));
    await child.ended;
    signal.throwIfAborted();
    const read = readFacts(lines);
    if (read.facts === null) throw noVideo(input, read);
    return read.facts;
  }

  async function* decode(order: DecodeOrder): AsyncGenerator<DecodedFrame, DecodeEnd> {
    const { input, facts, signal } = order;
    signal.throwIfAborted();
    const layout = layoutOf(input, facts);
    const chain = [...selection(order), SHOW, layout.filter, 'setpts=N'].join(',');
    const limit = Number.isFinite(order.count) ? ['-frames:v', String(order.count)] : [];
    const args = [...seeking(order), ...reading(input), '-vf', chain, ...found.passthrough, ...limit];
    const child = start([...args, '-f', 'rawvideo', 'pipe:1'], input, signal);
    const log = followLog(child);
    const pixels = new ByteReader(child.stdout);
    const bytes = new Uint8Array(frameBytes(layout, facts.widthPx, facts.heightPx));
    let count = 0;
    let changed: string | null = null;
    try {
      while (count < order.count) {
        const got = await pixels.read(bytes);
        signal.throwIfAborted();
        if (got < bytes.length) break;
        const line = await log.frame(count);
        if (line === null) throw new Error(`${found.path} sent picture ${count} without a line in its log`);
        changed = changeOf(line, facts);
        if (changed !== null) break;
        count++;
        yield { pts: line.pts, bidirectional: line.bidirectional, bytes };
      }
      if (count < order.count && changed === null) await log.closed;
      signal.throwIfAborted();
      return { complaint: log.complaint(), changed };
    } finally {
      await child.kill();
    }
  }

  async function framesBeforeComplaint(order: DecodeOrder): Promise<number> {
    const { input, signal } = order;
    const args = ['-threads', '1', '-debug_ts', ...reading(input), ...found.passthrough, '-f', 'null', '-'];
    const child = start(args, input, signal);
    child.stdout.resume();
    const watch = new ComplaintWatch();
    await eachLine(child.stderr, (text) => watch.see(text));
    await child.kill();
    signal.throwIfAborted();
    return watch.trustedFrames();
  }

  const close = async () => {}; // nothing runs between decodings
  return { name: backendName, version: found.version, describe, decode, framesBeforeComplaint, close };
}

const LOG = ['-loglevel', 'repeat+level+verbose'];
const SHOW = 'showinfo=checksum=0';

/** Only formats that can be footage, only from files: never a playlist, a text drawn as pictures or an address. */
function reading(input: FootageInput): string[] {
  const common = ['-noautorotate', '-copyts', '-protocol_whitelist', 'file,pipe', '-err_detect', CHECKS];
  const formats = ['-format_whitelist', READABLE_FORMATS];
  const source =
    input.kind === 'file' ? ['-i', `file:${input.path}`] : ['-f', 'concat', '-safe', '0', '-i', 'pipe:0'];
  return [...common, ...formats, ...source, '-map', '0:V:0'];
}

/** A seek need only land before the wanted frame: the exact one is chosen by its pts. */
function seeking(order: DecodeOrder): string[] {
  if (!('pts' in order.from)) return [];
  const { timeBase, startS } = order.facts;
  const atS = (order.from.pts * timeBase.num) / timeBase.den - startS;
  return atS > 0 ? ['-noaccurate_seek', '-ss', atS.toFixed(6)] : [];
}

function selection(order: DecodeOrder): string[] {
  if ('pts' in order.from) return [`select=gte(pts\\,${order.from.pts})`];
  return order.from.frame > 0 ? [`select=gte(n\\,${order.from.frame})`] : [];
}

type FrameLine = Extract<LogLine, { kind: 'frame' }>;

function changeOf(line: FrameLine, facts: StreamFacts): string | null {
  if (line.widthPx !== facts.widthPx || line.heightPx !== facts.heightPx) {
    return `size changes to ${line.widthPx} × ${line.heightPx}`;
  }
  return line.pixelFormat === facts.pixelFormat ? null : `pixel format changes to ${line.pixelFormat}`;
}

/** Collects the log while pictures come: the line of each frame, in order, and the first complaint. */
function followLog(child: Child) {
  const lines = new Map<number, FrameLine>();
  let seen = 0;
  let complaint: string | null = null;
  let over = false;
  let wake: () => void = () => {};
  const closed = eachLine(child.stderr, (text) => {
    const line = readLogLine(text);
    if (line.kind === 'complaint') complaint ??= line.text;
    if (line.kind !== 'frame') return;
    lines.set(seen++, line);
    wake();
  }).then(() => {
    over = true;
    wake();
  });
  return {
    closed,
    complaint: () => complaint,
    async frame(k: number): Promise<FrameLine | null> {
      while (!lines.has(k) && !over) {
        await new Promise<void>((resolve) => {
          wake = resolve;
        });
      }
      const line = lines.get(k) ?? null;
      lines.delete(k);
      return line;
    },
  };
}
