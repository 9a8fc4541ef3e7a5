/** How frames of a pixel format travel from the decoder, and how their luma is had. */
export interface PixelLayout {
  /** `coded`: the Y plane as it is; `grey`: the file has nothing but luma; `rgb-bt601`: see rgbLuma.ts. */
  readonly lumaRule: 'coded' | 'rgb-bt601' | 'grey';
  readonly bitDepth: number;
  readonly transport: 'luma' | 'rgbPacked' | 'rgbPlanar';
  readonly bytesPerSample: 1 | 2;
  /**
   * The libavfilter chain that makes the transport without changing a value. Never `format=gray` from YUV: that stretches
   * limited range. Depths above 8 keep their own grey format, so that 10-bit values stay 0 … 1023.
   */
  readonly filter: string;
}

/** Semi-planar and packed YUV, and the planar format of the same samples. */
const PLANAR_TWIN: Readonly<Record<string, string>> = {
  nv12: 'yuv420p',
  nv21: 'yuv420p',
  nv16: 'yuv422p',
  nv24: 'yuv444p',
  nv42: 'yuv444p',
  yuyv422: 'yuv422p',
  uyvy422: 'yuv422p',
  yvyu422: 'yuv422p',
};

const RGB_8 = new Set('rgb24 bgr24 rgba bgra argb abgr rgb0 bgr0 0rgb 0bgr pal8 monob monow'.split(' '));
const RGB_16 = new Set(['rgb48', 'bgr48', 'rgba64', 'bgra64']);
const DEPTHS = new Set([8, 9, 10, 12, 14, 16]);

/**
 * The layout for a pixel format as libavutil names it (`yuv420p10le`, `gray16be`, `gbrp12le`, …).
 *
 * @returns null for a format whose luma has no stated rule here (Bayer mosaics, floating point, 5-bit RGB)
 */
export function pixelLayout(pixelFormat: string): PixelLayout | null {
  const name = pixelFormat.replace(/(?:le|be)$/, '');
  const twin = PLANAR_TWIN[name];
  if (twin !== undefined) return luma('coded', 8, `format=${twin},extractplanes=y`);
  if (RGB_8.has(name)) return packed(8, 'rgb24');
  if (RGB_16.has(name)) return packed(16, 'rgb48le');

  const planar = /^(yuvj|yuva|yuv|gbrap|gbrp|gray|ya)(?:4\d\dp)?(\d+)?$/.exec(name);
  if (planar === null) return null;
  const bitDepth = Number(planar[2] ?? 8);
  if (!DEPTHS.has(bitDepth)) return null;
  const family = planar[1] ?? '';
  if (family.startsWith('gbr')) return rgbPlanar(bitDepth);
  if (family === 'gray') return luma('grey', bitDepth, bitDepth === 8 ? 'format=gray' : `format=${name}le`);
  const rule = family.startsWith('yuv') ? 'coded' : 'grey';
  if (bitDepth === 8) return luma(rule, 8, 'extractplanes=y');
  const little = pixelFormat.endsWith('be') ? `format=${name}le,` : '';
  return luma(rule, bitDepth, `${little}extractplanes=y,format=gray${bitDepth}le`);
}

/** Bytes of one frame as it travels. */
export function frameBytes(layout: PixelLayout, widthPx: number, heightPx: number): number {
  return widthPx * heightPx * layout.bytesPerSample * (layout.transport === 'luma' ? 1 : 3);
}

function luma(lumaRule: 'coded' | 'grey', bitDepth: number, filter: string): PixelLayout {
  return { lumaRule, bitDepth, transport: 'luma', bytesPerSample: bitDepth > 8 ? 2 : 1, filter };
}

function packed(bitDepth: 8 | 16, format: string): PixelLayout {
  return {
    lumaRule: 'rgb-bt601',
    bitDepth,
    transport: 'rgbPacked',
    bytesPerSample: bitDepth > 8 ? 2 : 1,
    filter: `format=${format}`,
  };
}

/** Planes travel one above the other, since packing them would stretch 10, 12 and 14 bits to 16. */
function rgbPlanar(bitDepth: number): PixelLayout {
  const stack = 'extractplanes=r+g+b[r][g][b];[r][g][b]vstack=inputs=3';
  return {
    lumaRule: 'rgb-bt601',
    bitDepth,
    transport: 'rgbPlanar',
    bytesPerSample: bitDepth > 8 ? 2 : 1,
    filter: bitDepth === 8 ? stack : `${stack},format=gray${bitDepth}le`,
  };
}
