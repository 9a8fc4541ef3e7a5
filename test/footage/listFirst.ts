/**
 * The same MP4 with its list of frames (moov) in front of the frames, as cameras that stream write it: what is cut off at the end then
 * are frames. Offsets in the list (stco) grow by its length (ISO/IEC 14496-12, 8.7.5).
 */
export function listFirst(mp4: Buffer): Buffer {
  const boxes: { type: string; bytes: Buffer }[] = [];
  for (let at = 0; at < mp4.length; ) {
    const length = mp4.readUInt32BE(at);
    boxes.push({ type: mp4.toString('latin1', at + 4, at + 8), bytes: mp4.subarray(at, at + length) });
    at += length;
  }
  const list = Buffer.from(boxes.find(({ type }) => type === 'moov')?.bytes ?? []);
  const offsets = list.indexOf('stco') + 8; // after the type: version and flags
  const count = list.readUInt32BE(offsets);
  for (let i = 0; i < count; i++) {
    const at = offsets + 4 + 4 * i;
    list.writeUInt32BE(list.readUInt32BE(at) + list.length, at);
  }
  const [first, ...others] = boxes.filter(({ type }) => type !== 'moov').map(({ bytes }) => bytes);
  return Buffer.concat([first ?? Buffer.alloc(0), list, ...others]);
}
