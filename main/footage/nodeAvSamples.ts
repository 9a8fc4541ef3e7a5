import * as av from 'node-av';

/** Chains that give the first plane as it is, which can be had without a filter. */
const FIRST_PLANE = new Set(['extractplanes=y', 'format=gray']);

/**
 * Takes the samples to be sent out of decoded frames, as the ffmpeg programs do with the same libavfilter chain.
 *
 * @returns a function from a frame to its samples; their array is used again for the next frame
 */
export function samplesBy(chain: string): (frame: av.Frame) => Uint8Array {
  if (FIRST_PLANE.has(chain)) {
    const copy = new PlaneCopy();
    return (frame) => copy.read(frame);
  }
  const filter = new FilterChain(chain);
  return (frame) => filter.read(frame);
}

/** libavutil's name of a frame's pixel format. */
export function formatName(frame: av.Frame): string {
  return av.avGetPixFmtName(frame.format as av.AVPixelFormat) ?? 'unknown';
}

/** The first plane's rows without their padding. */
class PlaneCopy {
  #out = new Uint8Array(0);

  read(frame: av.Frame, rowBytes = frame.width): Uint8Array {
    const plane = frame.data?.[0];
    const stride = frame.linesize[0] ?? 0;
    if (plane === undefined || stride < rowBytes) throw new Error('a decoded frame has no first plane');
    const bytes = rowBytes * frame.height;
    if (this.#out.length !== bytes) this.#out = new Uint8Array(bytes);
    if (stride === rowBytes) {
      this.#out.set(plane.subarray(0, bytes));
    } else {
      for (let row = 0; row < frame.height; row++) {
        this.#out.set(plane.subarray(row * stride, row * stride + rowBytes), row * rowBytes);
      }
    }
    return this.#out;
  }
}

/** The same libavfilter chain that the ffmpeg programs run. */
class FilterChain {
  readonly #chain: string;
  readonly #copy = new PlaneCopy();
  readonly #out = new av.Frame();
  #built: { graph: av.FilterGraph; source: av.FilterContext; sink: av.FilterContext } | null = null;

  constructor(chain: string) {
    this.#chain = chain;
    this.#out.alloc();
  }

  read(frame: av.Frame): Uint8Array {
    this.#built ??= this.#build(frame);
    const { source, sink } = this.#built;
    frame.pts = 0n; // times are read before; here they could only hold frames back
    const added = source.buffersrcAddFrameSync(frame, av.AV_BUFFERSRC_FLAG_KEEP_REF);
    const got = added < 0 ? added : sink.buffersinkGetFrameSync(this.#out);
    if (got < 0) throw new Error(`the filter ${this.#chain} gives no frame: ${av.FFmpegError.strerror(got)}`);
    const samples = this.#copy.read(this.#out, (this.#out.width * bitsPerPixel(this.#out)) / 8);
    this.#out.unref();
    return samples;
  }

  #build(frame: av.Frame): { graph: av.FilterGraph; source: av.FilterContext; sink: av.FilterContext } {
    const graph = new av.FilterGraph();
    graph.alloc();
    const from = `buffer@from=video_size=${frame.width}x${frame.height}:pix_fmt=${formatName(frame)}:time_base=1/1:pixel_aspect=1/1`;
    const parsed = graph.parsePtr(`${from},${this.#chain},buffersink@to`);
    const configured = parsed < 0 ? parsed : graph.configSync();
    const source = graph.getFilter('buffer@from');
    const sink = graph.getFilter('buffersink@to');
    if (configured < 0 || source === null || sink === null) {
      throw new Error(`the filter ${this.#chain} cannot be set up: ${av.FFmpegError.strerror(configured)}`);
    }
    return { graph, source, sink }; // the graph must outlive its ends
  }
}

/** Of the formats that filters put out here: grey of 8 to 16 bits, rgb24, rgb48. */
function bitsPerPixel(frame: av.Frame): number {
  const name = formatName(frame);
  if (name === 'rgb24') return 24;
  if (name.startsWith('rgb48')) return 48;
  return name === 'gray' ? 8 : 16;
}
