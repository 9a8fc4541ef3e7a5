import * as av from 'node-av';
import type { StreamFacts } from './decoder.ts';
import { quarterTurn } from './ffmpegFacts.ts';
import { isSilentDamage } from './ffmpegLog.ts';
import { CHECKS, READABLE_FORMATS } from './formats.ts';
import type { NodeAvMessage, NodeAvOrder } from './nodeAvMessages.ts';
import { formatName, samplesBy } from './nodeAvSamples.ts';

type Send = (message: NodeAvMessage, samples?: Uint8Array) => Promise<void>;

/** What FFmpeg's libraries complained of, in order. */
class Complaints {
  first: string | null = null;
  /** Whether anything was said since this was last set to false. */
  fresh = false;
  constructor() {
    av.Log.setLevel(av.AV_LOG_WARNING);
    const options = { maxLevel: av.AV_LOG_WARNING } as const;
    av.Log.setCallback((level, message) => this.hear(level, message.trim()), options);
  }
  hear(level: number, text: string): void {
    if (level > av.AV_LOG_ERROR && !isSilentDamage(text)) return;
    this.first ??= text;
    this.fresh = true;
  }
}

interface Opened {
  readonly format: av.FormatContext;
  readonly stream: av.Stream;
  readonly videoStreamCount: number;
}

/** Does what an order asks and answers with messages. Runs in the node-av process only. */
export async function answerOrder(order: NodeAvOrder, send: Send): Promise<void> {
  if (order.task === 'version') return await send({ type: 'version', version: av.ffmpegVersion() });
  const complaints = new Complaints();
  const opened = await openVideo(order, complaints, send);
  if (opened === null) return;
  try {
    if (order.task === 'describe') await describe(opened, complaints, send);
    else await decode(opened, order, complaints, send);
  } finally {
    await opened.format.closeInput();
  }
}

async function openVideo(order: NodeAvOrder, complaints: Complaints, send: Send): Promise<Opened | null> {
  const format = new av.FormatContext();
  format.allocContext();
  const options: Record<string, string> = {
    format_whitelist: READABLE_FORMATS,
    protocol_whitelist: 'file,data',
    err_detect: CHECKS,
  };
  const stills = order.script !== '';
  if (stills) options.safe = '0';
  const demuxer = stills ? av.InputFormat.findInputFormat('concat') : null;
  const url = stills ? `data:text/plain;base64,${Buffer.from(order.script).toString('base64')}` : order.url;
  const status = await format.openInput(url, demuxer, av.Dictionary.fromObject(options));
  if (status >= 0) await format.findStreamInfo();
  const all = status < 0 ? [] : format.streams;
  const videos = all.filter(
    (s) =>
      s.codecpar.codecType === av.AVMEDIA_TYPE_VIDEO && !s.hasDisposition(av.AV_DISPOSITION_ATTACHED_PIC),
  );
  const stream = videos[0];
  if (stream !== undefined) return { format, stream, videoStreamCount: videos.length };
  await settle();
  const complaint = complaints.first ?? (status < 0 ? av.FFmpegError.strerror(status) : null);
  await send({ type: 'noVideo', hasVideo: false, hasOther: all.length > 0, complaint });
  return null;
}

async function openDecoder({ stream }: Opened, threads: number): Promise<av.CodecContext | null> {
  const codec = av.Codec.findDecoder(stream.codecpar.codecId);
  if (codec === null) return null;
  const decoder = new av.CodecContext();
  decoder.allocContext3(codec);
  decoder.parametersToContext(stream.codecpar);
  decoder.pktTimebase = stream.timeBase;
  decoder.threadCount = threads;
  return (await decoder.open2(codec, av.Dictionary.fromObject({ err_detect: CHECKS }))) < 0 ? null : decoder;
}

/** FFmpeg's log reaches JavaScript by way of the event loop. */
function settle(): Promise<void> {
  return new Promise((resolve) => setImmediate(resolve));
}

/** How far demuxer and decoder came before the first complaint of each. Only exact with one thread, and `careful`. */
interface Before {
  packets: number;
  frames: number;
  readonly careful: boolean;
}

/** A decoder that only ever fails must come to an end too. */
const MOST_FAILURES_IN_A_ROW = 1000;

/** Decoded frames in order of display; the frame is reused. */
async function* decodedFrames(
  opened: Opened,
  decoder: av.CodecContext,
  complaints: Complaints,
  before: Before,
): AsyncGenerator<av.Frame> {
  const packet = new av.Packet();
  packet.alloc();
  const frame = new av.Frame();
  frame.alloc();
  let demuxerFailed = false;
  let decoderFailed = false;
  const complained = async () => {
    if (before.careful) await settle();
    const { fresh } = complaints;
    complaints.fresh = false;
    return fresh;
  };
  await complained();
  for (let atEnd = false; !atEnd; ) {
    const read = await opened.format.readFrame(packet);
    atEnd = read < 0;
    if (atEnd && read !== av.AVERROR_EOF) complaints.hear(av.AV_LOG_ERROR, av.FFmpegError.strerror(read));
    if (await complained()) demuxerFailed = true;
    if (!atEnd && packet.streamIndex !== opened.stream.index) {
      packet.unref();
      continue;
    }
    if (!atEnd && !demuxerFailed) before.packets++;
    const sent = await decoder.sendPacket(atEnd ? null : packet);
    packet.unref();
    if (sent < 0) complaints.hear(av.AV_LOG_ERROR, av.FFmpegError.strerror(sent));
    for (let failures = 0; failures < MOST_FAILURES_IN_A_ROW; ) {
      const got = await decoder.receiveFrame(frame);
      const none = got === av.AVERROR_EAGAIN || got === av.AVERROR_EOF;
      if (got < 0 && !none) complaints.hear(av.AV_LOG_ERROR, av.FFmpegError.strerror(got));
      if (got >= 0 && (frame.decodeErrorFlags !== 0 || frame.hasFlags(av.AV_FRAME_FLAG_CORRUPT))) {
        complaints.hear(av.AV_LOG_ERROR, 'corrupt decoded frame');
      }
      if (await complained()) decoderFailed = true;
      if (none) break;
      failures = got < 0 ? failures + 1 : 0;
      if (got < 0) continue;
      if (!decoderFailed) before.frames++;
      yield frame;
    }
  }
  await settle();
}

async function describe(opened: Opened, complaints: Complaints, send: Send): Promise<void> {
  const { format, stream, videoStreamCount } = opened;
  const decoder = await openDecoder(opened, 1);
  const before = { packets: 0, frames: 0, careful: false };
  if (decoder !== null) {
    for await (const frame of decodedFrames(opened, decoder, complaints, before)) {
      const rate = stream.avgFrameRate;
      const facts: StreamFacts = {
        codec: av.avGetCodecName(stream.codecpar.codecId) ?? 'unknown',
        pixelFormat: formatName(frame),
        widthPx: frame.width,
        heightPx: frame.height,
        timeBase: { num: stream.timeBase.num, den: stream.timeBase.den },
        clockwiseDeg: quarterTurn(counterClockwiseDeg(stream)),
        videoStreamCount,
        startS: seconds(format.startTime) ?? 0,
        durationS: seconds(format.duration),
        frameRateHz: rate.num > 0 && rate.den > 0 ? rate.num / rate.den : null,
      };
      return await send({ type: 'facts', facts });
    }
  }
  await settle();
  await send({ type: 'noVideo', hasVideo: true, hasOther: false, complaint: complaints.first });
}

function seconds(microseconds: bigint): number | null {
  return microseconds === av.AV_NOPTS_VALUE ? null : Number(microseconds) / 1e6;
}

/** The display matrix: nine 32-bit numbers; the first and fourth hold cosine and sine of the turn in 16.16 fixed point. */
function counterClockwiseDeg(stream: av.Stream): number {
  const matrix = stream.codecpar.getCodedSideData(av.AV_PKT_DATA_DISPLAYMATRIX);
  if (matrix === null) return 0;
  return (-Math.atan2(matrix.readInt32LE(4), matrix.readInt32LE(0)) * 180) / Math.PI;
}

async function decode(opened: Opened, order: NodeAvOrder, complaints: Complaints, send: Send): Promise<void> {
  const careful = order.task === 'count';
  const decoder = await openDecoder(opened, careful ? 1 : 0);
  if (decoder === null) throw new Error('the decoder that described the footage cannot be opened again');
  if ('pts' in order.from) {
    const { index } = opened.stream;
    await opened.format.seekFrame(index, BigInt(order.from.pts), av.AVSEEK_FLAG_BACKWARD);
  }
  await settle();
  complaints.fresh = false; // what is complained of while the file is looked at comes again while it is decoded
  const before = { packets: 0, frames: 0, careful };
  const most = order.count ?? Number.POSITIVE_INFINITY;
  const samplesOf = samplesBy(order.filter);
  let sent = 0;
  let seen = 0;
  let changed: string | null = null;
  for await (const frame of decodedFrames(opened, decoder, complaints, before)) {
    changed = changeOf(frame, order);
    if (changed !== null) break;
    const time = frame.bestEffortTimestamp;
    const pts = time === av.AV_NOPTS_VALUE ? null : Number(time);
    const wanted = 'pts' in order.from ? pts !== null && pts >= order.from.pts : seen >= order.from.frame;
    seen++;
    if (careful || !wanted) continue;
    const bidirectional = frame.pictType === av.AV_PICTURE_TYPE_B;
    await send({ type: 'frame', pts, bidirectional }, samplesOf(frame));
    if (++sent >= most) break;
  }
  const beforeComplaint = Math.min(before.packets, before.frames);
  await send({ type: 'end', complaint: complaints.first, changed, beforeComplaint });
}

function changeOf(frame: av.Frame, { expected }: NodeAvOrder): string | null {
  if (expected === null) return null;
  if (frame.width !== expected.widthPx || frame.height !== expected.heightPx) {
    return `size changes to ${frame.width} × ${frame.height}`;
  }
  const name = formatName(frame);
  return name === expected.pixelFormat ? null : `pixel format changes to ${name}`;
}
