import { basename } from 'node:path';
import { startPace } from '../jobs/pace.ts';
import { Refusal } from '../refusal.ts';
import { unexpectedMessage } from './errorAnswer.ts';
import type { FootageEvent, FootageSummary } from './footageEvents.ts';
import type { OpenedFootage, OpenFootages } from './openFootages.ts';
import type { Services } from './services.ts';

/**
 * Opens footage and decodes it once from end to end, saying how far it is. Ends with one event, `opened` or `refused`; with
 * none when the signal was aborted. Whatever was opened and is not kept is closed.
 */
export async function openWithProgress(
  path: string,
  openFootage: Services['openFootage'],
  opened: OpenFootages,
  send: (event: FootageEvent) => void,
  signal: AbortSignal,
): Promise<void> {
  try {
    const source = await openFootage(path);
    try {
      const pace = startPace('index', (progress) => send({ event: 'progress', ...progress }));
      const onFrame = ({ n }: { readonly n: number }, expected: number | null) =>
        pace.frameDone(n + 1, expected);
      const index = await source.index({ signal, onFrame });
      signal.throwIfAborted();
      send({ event: 'opened', ...summary(await opened.add(source, index)) });
    } catch (error) {
      await source.close();
      throw error;
    }
  } catch (error) {
    if (signal.aborted) return;
    const refusal =
      error instanceof Refusal
        ? error
        : new Refusal('unexpected', 1, unexpectedMessage(`opening ${path}`, error));
    send({ event: 'refused', code: refusal.code, status: refusal.status, message: refusal.message });
  }
}

function summary({ id, source, index }: OpenedFootage): FootageSummary {
  const { num, den } = index.timeBase;
  return {
    footageId: id,
    path: source.path,
    name: basename(source.path),
    frameCount: index.frameCount,
    widthPx: index.widthPx,
    heightPx: index.heightPx,
    bitDepth: index.bitDepth,
    bitsPerPixel: index.bitsPerPixel,
    timeS: index.pts.map((pts) => (pts === null ? null : (pts * num) / den)),
    timeBase: index.timeBase,
    codec: index.codec,
    pixelFormat: index.pixelFormat,
    lumaRule: index.lumaRule,
    rotationDeg: index.rotationDeg,
    sha256: index.sha256,
    backend: source.backend,
    findings: index.findings,
  };
}
