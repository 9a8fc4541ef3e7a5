/**
 * A list of stills for libavformat's concat demuxer: any names, any gaps in the numbering. The nominal duration only keeps the
 * demuxer's clock running; stills have no times.
 */
export function concatScript(files: readonly string[]): string {
  const entries = files.map((file) => `file '${`file:${file}`.replaceAll("'", "'\\''")}'\nduration 0.04\n`);
  return `ffconcat version 1.0\n${entries.join('')}`;
}
