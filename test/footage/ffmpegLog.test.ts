import { describe, expect, it } from 'vitest';
import { ComplaintWatch } from '../../main/footage/complaintWatch.ts';
import { quarterTurn } from '../../main/footage/ffmpegFacts.ts';
import { readLogLine } from '../../main/footage/ffmpegLog.ts';
import { pixelLayout } from '../../main/footage/pixelLayout.ts';

// lines as written by ffmpeg 5.1 and 7.0

describe('readLogLine', () => {
  it('reads frames of old and new versions', () => {
    const old =
      '[Parsed_showinfo_1 @ 0x56131144c940] [info] n:   1 pts:     16 pts_time:0.001   pos:    27414 fmt:gray sar:1/1 s:1280x800 i:P iskey:0 type:B ';
    const recent =
      '[Parsed_showinfo_0 @ 0x7f6490001cc0] [info] n:   0 pts:NOPTS pts_time:NOPTS duration:      0 duration_time:0       fmt:yuv420p cl:left sar:1/1 s:1280x800 i:P iskey:1 type:I ';
    const size = { kind: 'frame', widthPx: 1280, heightPx: 800 };
    expect(readLogLine(old)).toEqual({ ...size, pts: 16, pixelFormat: 'gray', bidirectional: true });
    expect(readLogLine(recent)).toEqual({ ...size, pts: null, pixelFormat: 'yuv420p', bidirectional: false });
  });

  it('takes errors, and warnings of wrong bytes, for complaints; neither other warnings nor what comes after the decoder', () => {
    const kind = (line: string) => readLogLine(line).kind;
    expect(kind('[h264 @ 0x55b2972ef340] [error] Invalid NAL unit size (7951 > 3706).')).toBe('complaint');
    expect(kind('[warning] file:/a/error.mp4: corrupt input packet in stream 0')).toBe('complaint');
    expect(kind('[mjpeg @ 0x5] [warning] overread 8')).toBe('complaint');
    expect(kind('[concat @ 0x55] [warning] DTS -230584300921369 < 0 out of order')).toBe('other');
    expect(kind('[warning] file:/a/error.mp4: could not seek')).toBe('other');
    expect(kind('[swscaler @ 0x5] [error] anything')).toBe('other');
  });
});

describe('ComplaintWatch', () => {
  const packet = '[vist#0:0/h264 @ 0x1] [info] demuxer -> ist_index:0:0 type:video pkt_pts:0';
  const frame = '[vist#0:0/h264 @ 0x1] [dec:h264 @ 0x2] [info] decoder -> pts:0 pts_time:0';
  const parser = '[h264 @ 0x37e98f40] [error] Invalid NAL unit size (7951 > 3706).';
  const decoder = '[h264 @ 0x37e39640] [error] Error splitting the input into NAL units.';

  function trusted(...lines: string[]): number {
    const watch = new ComplaintWatch();
    for (const line of lines) watch.see(line);
    return watch.trustedFrames();
  }

  it('is not misled by a reader that is ahead of the decoder in a thread of its own', () => {
    const lines = [
      '[info] Stream mapping:',
      packet,
      packet,
      packet,
      parser,
      packet,
      frame,
      frame,
      decoder,
      frame,
    ];
    expect(trusted(...lines)).toBe(2);
    expect(trusted(...lines.filter((line) => line !== decoder))).toBe(0); // alone, it may be the decoder's
  });

  it('trusts no more frames than packets before a container that breaks off', () => {
    const end = '[matroska,webm @ 0x3] [error] File ended prematurely';
    expect(trusted('[info] Stream mapping:', packet, packet, end, frame, frame)).toBe(2);
    expect(trusted('[info] Stream mapping:', packet, end, packet, frame, frame)).toBe(1);
  });

  it('leaves out what is complained of before decoding begins', () => {
    expect(trusted(decoder, '[info] Stream mapping:', packet, frame)).toBe(1);
  });
});

describe('quarterTurn', () => {
  it('turns clockwise what libavutil turns counter-clockwise', () => {
    expect([-90, 90, 180, -180, 0, -0, 270].map(quarterTurn)).toEqual([90, 270, 180, 180, 0, 0, 90]);
    expect(quarterTurn(45)).toBeNull();
  });
});

describe('pixelLayout', () => {
  it('never lets a filter choose grey from YUV, which stretches limited range', () => {
    for (const name of ['yuv420p', 'yuvj422p', 'yuva444p', 'yuv420p10le', 'yuv422p12be', 'nv12', 'yuyv422']) {
      const layout = pixelLayout(name);
      expect(layout?.lumaRule, name).toBe('coded');
      expect(layout?.filter, name).toMatch(/extractplanes=y/);
    }
  });

  it('keeps the depth of the coded values', () => {
    const depths = ['yuv420p', 'yuv420p10le', 'gray12le', 'yuv444p14be', 'gray16be', 'gbrp10le', 'rgb48be'];
    expect(depths.map((name) => pixelLayout(name)?.bitDepth)).toEqual([8, 10, 12, 14, 16, 10, 16]);
  });

  it('has no layout where luma has no stated rule', () => {
    for (const name of ['bayer_rggb8', 'grayf32le', 'rgb555le', 'xyz12le'])
      expect(pixelLayout(name), name).toBeNull();
  });
});
