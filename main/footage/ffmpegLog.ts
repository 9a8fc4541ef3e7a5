import type { Readable } from 'node:stream';

/** What one line of ffmpeg's log says (`-loglevel repeat+level+verbose`), as far as it matters here. */
export type LogLine =
  | {
      readonly kind: 'frame';
      readonly pts: number | null;
      readonly pixelFormat: string;
      readonly widthPx: number;
      readonly heightPx: number;
      readonly bidirectional: boolean;
    }
  | { readonly kind: 'timeBase'; readonly num: number; readonly den: number }
  | { readonly kind: 'complaint'; readonly text: string; readonly origin: string }
  | { readonly kind: 'demuxed' }
  | { readonly kind: 'decoded' }
  | { readonly kind: 'other'; readonly text: string };

const FRAME = /Parsed_showinfo.*\] n: *\d+ pts: *(-?\d+|NOPTS) .*fmt:(\S+) .*s:(\d+)x(\d+) .*type:(.)/;

/** Warnings by which a demuxer or decoder says that bytes were wrong, though it went on. */
const SILENT_DAMAGE =
  /corrupt|overread|EOI missing|truncat|concealing|Invalid|error|missing picture|mmco|decode_slice|non-existing/i;

/** Parts of ffmpeg that come after the decoder: what they complain of is no damage of the footage. */
const AFTER_DECODER = /^\[(?:out#|vost#|rawvideo|null|swscaler|Parsed_|graph|auto_scale|AVIOContext)/;

/** Reads one line of the log. */
export function readLogLine(line: string): LogLine {
  const frame = FRAME.exec(line);
  if (frame !== null) {
    return {
      kind: 'frame',
      pts: frame[1] === 'NOPTS' ? null : Number(frame[1]),
      pixelFormat: frame[2] ?? '',
      widthPx: Number(frame[3]),
      heightPx: Number(frame[4]),
      bidirectional: frame[5] === 'B',
    };
  }
  const timeBase = /Parsed_showinfo.*\] config in time_base: (\d+)\/(\d+)/.exec(line);
  if (timeBase !== null) return { kind: 'timeBase', num: Number(timeBase[1]), den: Number(timeBase[2]) };
  if (/\] decoder -> /.test(line)) return { kind: 'decoded' };
  if (/\] demuxer -> .*type:video/.test(line)) return { kind: 'demuxed' };
  return complaintOf(line) ?? { kind: 'other', text: line };
}

function complaintOf(line: string): LogLine | null {
  const parts = /^((?:\[[^\]]*\] )*?)\[(error|fatal|panic|warning)\] (.*)$/.exec(line);
  if (parts === null || AFTER_DECODER.test(line)) return null;
  const origin = (parts[1] ?? '').trim();
  const text = (parts[3] ?? '')
    .trim()
    .replace(/^file:.*: (?=corrupt )/, '')
    .replace(/\.$/, '');
  // ffmpeg's own warnings name the file, which may be called anything: of those only the two about corruption count
  const damage = origin === '' ? /^corrupt (?:input packet|decoded frame)/.test(text) : isSilentDamage(text);
  return parts[2] !== 'warning' || damage ? { kind: 'complaint', text, origin } : null;
}

/** Whether a demuxer's or decoder's warning speaks of wrong bytes. */
export function isSilentDamage(warning: string): boolean {
  return SILENT_DAMAGE.test(warning);
}

/** Hands on a text stream line by line; `whenDone` resolves after the last one. */
export function eachLine(stream: Readable, onLine: (line: string) => void): Promise<void> {
  let rest = '';
  stream.setEncoding('utf8');
  stream.on('data', (chunk: string) => {
    const lines = (rest + chunk).split(/\r?\n|\r/);
    rest = lines.pop() ?? '';
    for (const line of lines) onLine(line);
  });
  return new Promise((resolve) => {
    stream.once('close', () => {
      if (rest !== '') onLine(rest);
      resolve();
    });
  });
}
