import type { Finding } from '../../analysis/sheet/result.ts';
import { Refusal } from '../refusal.ts';
import { type ContainerClaim, containerClaim } from './containerClaim.ts';
import type { DecodeOrder, Decoder, StreamFacts } from './decoder.ts';
import type { FootageInput } from './footageInput.ts';
import type { FootageIndex, NumberedPicture } from './frameSource.ts';
import { footageSha256, lumaHash } from './hashes.ts';
import { layoutOf } from './layoutOf.ts';
import { pictureMaker } from './pictureMaker.ts';
import { checkTimes } from './timestamps.ts';
import { trust } from './trust.ts';

type OnFrame = (frame: NumberedPicture, expectedCount: number | null) => void;

/**
 * Decodes footage once from end to end and says what is known of it.
 *
 * @throws Refusal (status 3) where no frame can be trusted
 */
export async function buildIndex(
  decoder: Decoder,
  input: FootageInput,
  facts: StreamFacts,
  signal: AbortSignal,
  onFrame: OnFrame | undefined,
): Promise<FootageIndex> {
  const claim = await claimOf(input);
  const expectedCount = claim.frames ?? countFromLength(facts);
  const layout = layoutOf(input, facts);
  const toPicture = pictureMaker(layout, facts);
  const order: DecodeOrder = { input, facts, from: { frame: 0 }, count: Number.POSITIVE_INFINITY, signal };
  const hashing = footageSha256(input, signal);
  hashing.catch(() => {}); // awaited below; until then a failed decoding comes first

  const pts: (number | null)[] = [];
  const frameHashes: string[] = [];
  let reordered = false;
  let size = { widthPx: 0, heightPx: 0 };
  const frames = decoder.decode(order);
  let step = await frames.next();
  for (; !step.done; step = await frames.next()) {
    const picture = toPicture(step.value.bytes);
    size = picture;
    pts.push(step.value.pts);
    reordered ||= step.value.bidirectional;
    frameHashes.push(lumaHash(picture.luma));
    onFrame?.({ n: pts.length - 1, picture }, expectedCount);
  }
  const end = step.value;
  const beforeComplaint = end.complaint === null ? 0 : await decoder.framesBeforeComplaint(order);
  const { name } = input;
  const stills = input.kind === 'stills';
  const decoded = pts.length;
  const trusted = trust({ name, decoded, end, claim, beforeComplaint, stills, pts, reordered });
  if (trusted.frameCount === 0) {
    const why = trusted.findings.map((finding) => finding.text).join('; ') || 'none can be decoded';
    const message = `${name}: no frame can be trusted (${why}); copy the footage from the camera again`;
    throw new Refusal('footageWithoutFrames', 3, message);
  }
  const times = checkTimes({
    name,
    kind: input.kind,
    container: claim.container,
    pts: pts.slice(0, trusted.frameCount),
    timeBase: facts.timeBase,
    reordered,
  });
  return {
    frameCount: trusted.frameCount,
    widthPx: size.widthPx,
    heightPx: size.heightPx,
    bitDepth: layout.bitDepth,
    pts: times.pts,
    timeBase: facts.timeBase,
    sha256: await hashing,
    frameHashes: frameHashes.slice(0, trusted.frameCount),
    codec: facts.codec,
    pixelFormat: facts.pixelFormat,
    rotationDeg: facts.clockwiseDeg ?? 0,
    lumaRule: layout.lumaRule,
    bitsPerPixel: (input.bytes * 8) / (pts.length * size.widthPx * size.heightPx),
    findings: [...inputFindings(input, facts), ...trusted.findings, ...times.findings],
  };
}

async function claimOf(input: FootageInput): Promise<ContainerClaim> {
  if (input.kind === 'file') return await containerClaim(input.path);
  return { container: 'other', frames: input.files.length, missingBytes: 0 };
}

/** Only good for a progress bar: containers round their length, and the rate may vary. */
function countFromLength({ durationS, frameRateHz }: StreamFacts): number | null {
  if (durationS === null || frameRateHz === null) return null;
  return Math.max(1, Math.round(durationS * frameRateHz));
}

function inputFindings(input: FootageInput, facts: StreamFacts): Finding[] {
  const findings: Finding[] = input.kind === 'stills' ? [...input.findings] : [];
  if (facts.videoStreamCount > 1) {
    const text = `${input.name}: holds ${facts.videoStreamCount} video streams; the first is used`;
    findings.push({ level: 'caution', code: 'severalVideoStreams', text });
  }
  if (facts.clockwiseDeg === null) {
    const text = `${input.name}: asks to be shown at an angle that is no quarter turn; it is shown as coded`;
    findings.push({ level: 'caution', code: 'rotationIgnored', text });
  }
  return findings;
}
