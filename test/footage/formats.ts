import { mkdir, writeFile } from 'node:fs/promises';
import { dirname } from 'node:path';
import type { Picture } from '../../analysis/track/track.ts';
import type { FootageForm } from '../../fixtures/encode/form.ts';
import { encode } from '../../fixtures/encode.ts';
import { patterns } from './pattern.ts';
import { planarRgbFile, planarRgbSample } from './planarRgb.ts';
import { PNG_GREY, PNG_PALETTE, PNG_RGB, png } from './png.ts';
import { writeRawAvi } from './rawAvi.ts';

/** One way in which footage comes, with what must be read from it. */
export interface Format {
  readonly name: string;
  readonly file: string;
  /** Writes the footage. @returns its luma, or null where the coding loses some */
  make(path: string): Promise<readonly Picture[] | null>;
  readonly frameCount: number;
  readonly lumaRule: 'coded' | 'rgb-bt601' | 'grey';
  readonly bitDepth: number;
  /** Seconds from one frame to the next in the file's own times; null where it has none. */
  readonly intervalS: number | null;
}

const W = 48; // v210 stores rows in groups of 48 pixels
const H = 32;
const COUNT = 12;

export const formats: readonly Format[] = [
  coded('H.264 in MP4, lossless, with B-frames', 'h264.mp4', { kind: 'h264', crf: 0, bFrames: 2 }, true),
  coded('H.264 in MOV, lossy', 'h264.mov', { kind: 'h264', crf: 23 }, false),
  coded('HEVC in MP4, lossy, with B-frames', 'hevc.mp4', { kind: 'hevc', crf: 20, bFrames: 2 }, false),
  coded('MJPEG in AVI', 'mjpeg.avi', { kind: 'mjpeg', quality: 3 }, false),
  grey('uncompressed grey in AVI', 'grey.avi', { kind: 'rawGrey' }, 8),
  grey('FFV1 in Matroska, 8 bit', 'ffv1.mkv', { kind: 'ffv1' }, 8),
  grey('FFV1 in Matroska, 16 bit', 'ffv1-16.mkv', { kind: 'ffv1' }, 16),
  { ...grey('PNG stills, 8 bit', 'png8/s_%05d.png', { kind: 'png' }, 8), intervalS: null },
  { ...grey('PNG stills, 16 bit', 'png16/s_%05d.png', { kind: 'png' }, 16), intervalS: null },
  { ...grey('TIFF stills, 8 bit', 'tiff8/s_%05d.tiff', { kind: 'tiff' }, 8), intervalS: null },
  { ...grey('TIFF stills, 16 bit', 'tiff16/s_%05d.tiff', { kind: 'tiff' }, 16), intervalS: null },
  packedYuv('YUY2 in AVI', 'yuy2.avi', 'YUY2', 0),
  packedYuv('UYVY in AVI', 'uyvy.avi', 'UYVY', 1),
  semiPlanar(),
  tenBit(),
  bottomUpRgb(),
  pngRgb(8),
  pngRgb(16),
  pngPalette(),
  planarRgb(),
];

function coded(name: string, file: string, form: FootageForm, lossless: boolean): Format {
  const common = { name, file, frameCount: COUNT, bitDepth: 8, intervalS: 1 / 250 };
  return {
    ...common,
    lumaRule: 'coded',
    async make(path) {
      const pictures = patterns(COUNT, 2 * W, 2 * H);
      await encode(pictures, path, form, { playRateHz: 250 });
      return lossless ? pictures : null;
    },
  };
}

function grey(name: string, file: string, form: FootageForm, bitDepth: 8 | 16): Format {
  return {
    name,
    file,
    frameCount: COUNT,
    lumaRule: 'grey',
    bitDepth,
    intervalS: 1 / 250,
    async make(path) {
      await mkdir(dirname(path), { recursive: true });
      const pictures = patterns(COUNT, W, H, bitDepth);
      await encode(pictures, path, form, { playRateHz: 250 });
      return pictures;
    },
  };
}

/** 4:2:2, two bytes per pixel; chroma differs from luma, so that a mix-up shows. */
function packedYuv(name: string, file: string, fourcc: string, lumaAt: 0 | 1): Format {
  return raw(name, file, { fourcc, bits: 16, bitDepth: 8, lumaRule: 'coded' }, ({ luma }) => {
    const bytes = new Uint8Array(2 * luma.length).fill(77);
    for (const [i, y] of luma.entries()) bytes[2 * i + lumaAt] = y;
    return bytes;
  });
}

function semiPlanar(): Format {
  const order = { fourcc: 'NV12', bits: 12, bitDepth: 8, lumaRule: 'coded' } as const;
  return raw('NV12 in AVI', 'nv12.avi', order, ({ luma }) => {
    const bytes = new Uint8Array(1.5 * luma.length).fill(77);
    bytes.set(luma);
    return bytes;
  });
}

/** v210: six pixels of 4:2:2 in four little-endian words of three 10-bit samples each. */
function tenBit(): Format {
  const order = { fourcc: 'v210', bits: 20, bitDepth: 10, lumaRule: 'coded' } as const;
  return raw('v210 in AVI', 'v210.avi', order, ({ luma }) => {
    const bytes = Buffer.alloc((luma.length / 6) * 16);
    const c = 300;
    for (let i = 0, at = 0; i < luma.length; i += 6, at += 16) {
      const y = (k: number) => luma[i + k] ?? 0;
      bytes.writeUInt32LE(c | (y(0) << 10) | (c << 20), at);
      bytes.writeUInt32LE(y(1) | (c << 10) | (y(2) << 20), at + 4);
      bytes.writeUInt32LE(c | (y(3) << 10) | (c << 20), at + 8);
      bytes.writeUInt32LE(y(4) | (c << 10) | (y(5) << 20), at + 12);
    }
    return bytes;
  });
}

function bottomUpRgb(): Format {
  const order = { fourcc: '', bits: 24, bitDepth: 8, lumaRule: 'rgb-bt601' } as const;
  return raw(
    'uncompressed RGB in AVI',
    'rgb.avi',
    order,
    ({ luma }) => {
      const bytes = new Uint8Array(3 * luma.length);
      for (let y = 0; y < H; y++) {
        for (let x = 0; x < W; x++) {
          const { r, g, b } = colour(luma[y * W + x] ?? 0, 255);
          bytes.set([b, g, r], 3 * ((H - 1 - y) * W + x));
        }
      }
      return bytes;
    },
    255,
  );
}

function raw(
  name: string,
  file: string,
  order: { fourcc: string; bits: number; bitDepth: number; lumaRule: Format['lumaRule'] },
  stored: (picture: Picture) => Uint8Array,
  colouredUpTo: number | null = null,
): Format {
  const { bitDepth, lumaRule } = order;
  return {
    name,
    file,
    frameCount: COUNT,
    lumaRule,
    bitDepth,
    intervalS: 1 / 250,
    async make(path) {
      const pictures = patterns(COUNT, W, H, bitDepth);
      const size = { ...order, widthPx: W, heightPx: H, rateHz: 250 };
      await writeRawAvi(path, size, pictures.map(stored));
      return colouredUpTo === null ? pictures : pictures.map((p) => lumaOfColours(p, colouredUpTo));
    },
  };
}

/** Three unlike channels made from one value. */
function colour(value: number, most: number): { r: number; g: number; b: number } {
  return { r: value, g: most - value, b: (value * 5) % (most + 1) };
}

/** The rule as it is stated to users: round(0.299 R + 0.587 G + 0.114 B), halves up; here in whole numbers of BigInt. */
function bt601(r: number, g: number, b: number): number {
  const thousandths = 299n * BigInt(r) + 587n * BigInt(g) + 114n * BigInt(b);
  return Number((thousandths + 500n) / 1000n);
}

function lumaOfColours(picture: Picture, most: number): Picture {
  const luma = picture.luma.map((value) => {
    const { r, g, b } = colour(value, most);
    return bt601(r, g, b);
  });
  return { ...picture, luma };
}

function pngRgb(bitDepth: 8 | 16): Format {
  const most = 2 ** bitDepth - 1;
  return stills(
    `PNG stills, RGB ${bitDepth} bit`,
    `rgb${bitDepth}/s_%05d.png`,
    'rgb-bt601',
    bitDepth,
    (picture) => {
      const rows = Array.from({ length: H }, (_, y) => {
        const row = Buffer.alloc((3 * W * bitDepth) / 8);
        for (let x = 0; x < W; x++) {
          const { r, g, b } = colour(picture.luma[y * W + x] ?? 0, most);
          for (const [k, value] of [r, g, b].entries()) {
            if (bitDepth === 8) row[3 * x + k] = value;
            else row.writeUInt16BE(value, 2 * (3 * x + k));
          }
        }
        return row;
      });
      return { file: png(W, bitDepth, PNG_RGB, rows), luma: lumaOfColours(picture, most) };
    },
  );
}

function pngPalette(): Format {
  return stills('PNG stills, palette', 'palette/s_%05d.png', 'rgb-bt601', 8, (picture) => {
    const palette = new Uint8Array(768);
    for (let i = 0; i < 256; i++) {
      const { r, g, b } = colour(i, 255);
      palette.set([r, g, b], 3 * i);
    }
    const rows = Array.from({ length: H }, (_, y) => Uint8Array.from(picture.luma.slice(y * W, (y + 1) * W)));
    return { file: png(W, 8, PNG_PALETTE, rows, palette), luma: lumaOfColours(picture, 255) };
  });
}

function stills(
  name: string,
  file: string,
  lumaRule: Format['lumaRule'],
  bitDepth: 8 | 16,
  still: (picture: Picture) => { file: Buffer; luma: Picture },
): Format {
  return {
    name,
    file,
    frameCount: COUNT,
    lumaRule,
    bitDepth,
    intervalS: null,
    async make(path) {
      await mkdir(dirname(path), { recursive: true });
      const made = patterns(COUNT, W, H, bitDepth).map(still);
      for (const [n, { file: bytes }] of made.entries()) {
        await writeFile(path.replace('%05d', String(n).padStart(5, '0')), bytes);
      }
      return made.map(({ luma }) => luma);
    },
  };
}

function planarRgb(): Format {
  return {
    name: 'FFV1 in Matroska, planar RGB 10 bit',
    file: 'planar.mkv',
    frameCount: 2,
    lumaRule: 'rgb-bt601',
    bitDepth: 10,
    intervalS: 1 / 100,
    async make(path) {
      await writeFile(path, planarRgbFile);
      return [0, 1].map((n) => ({
        widthPx: 16,
        heightPx: 8,
        bitDepth: 10,
        luma: Uint16Array.from({ length: 128 }, (_, i) =>
          bt601(planarRgbSample(n, 'r', i), planarRgbSample(n, 'g', i), planarRgbSample(n, 'b', i)),
        ),
      }));
    },
  };
}

/** Grey PNG with given rows: for tests of the numbering. */
export function greyPng({ widthPx, heightPx, luma }: Picture): Buffer {
  const rows = Array.from({ length: heightPx }, (_, y) =>
    Uint8Array.from(luma.slice(y * widthPx, (y + 1) * widthPx)),
  );
  return png(widthPx, 8, PNG_GREY, rows);
}
