import { isAbsolute, join } from 'node:path';
import { Readable } from 'node:stream';
import type { ReadableStream as NodeReadableStream } from 'node:stream/web';
import { Hono } from 'hono';
import { z } from 'zod';
import { Refusal } from '../refusal.ts';
import { checked } from './checked.ts';
import { eventStream } from './eventStream.ts';
import type { FootageEvent } from './footageEvents.ts';
import { keepDropped } from './keepDropped.ts';
import { displayBytes, exactBytes } from './lumaBytes.ts';
import type { OpenFootages } from './openFootages.ts';
import { openWithProgress } from './openWithProgress.ts';
import type { Services } from './services.ts';

const footagePath = z.object({
  path: z.string().refine(isAbsolute, 'must be the whole path of the footage'),
});
const frameAddress = z.object({ id: z.string(), n: z.string().regex(/^\d{1,9}$/, 'must be a frame number') });

/** Footage and its frames. */
export function footageRoutes({ openFootage, dataFolder }: Services, opened: OpenFootages) {
  return new Hono()
    .post('/', checked('json', footagePath), (c) => {
      const { path } = c.req.valid('json');
      return eventStream<FootageEvent>((send, signal) =>
        openWithProgress(path, openFootage, opened, send, signal),
      );
    })
    .post('/dropped', checked('query', z.object({ name: z.string().min(1) })), async (c) => {
      const { body } = c.req.raw;
      const stated = Number(c.req.header('content-length') ?? Number.NaN);
      const file = {
        name: c.req.valid('query').name,
        sizeBytes: Number.isFinite(stated) ? stated : null,
        bytes: body ? Readable.fromWeb(body as NodeReadableStream<Uint8Array>) : Readable.from([]),
      };
      return c.json({ path: await keepDropped(file, join(dataFolder, 'dropped')) });
    })
    .get(
      '/:id/frames/:n',
      checked('param', frameAddress),
      checked('query', z.object({ as: z.enum(['8', 'raw']).optional() })),
      async (c) => {
        const { id, n } = c.req.valid('param');
        const { source, index } = opened.get(id);
        if (Number(n) >= index.frameCount)
          throw new Refusal(
            'frameUnknown',
            2,
            `Frame ${n} is not in the footage; its last frame is ${index.frameCount - 1}.`,
          );
        const picture = await source.frame(Number(n)).catch((error: unknown) => {
          opened.get(id); // closed while the frame was on its way: that is the reason, and no defect
          throw error;
        });
        const display = c.req.valid('query').as === 'raw' ? null : displayBytes(picture);
        return c.body(display?.bytes ?? exactBytes(picture), 200, {
          'content-type': 'application/octet-stream',
          'cache-control': 'private, max-age=31536000, immutable',
          'x-width': String(picture.widthPx),
          'x-height': String(picture.heightPx),
          'x-bit-depth': String(picture.bitDepth),
          // One step of a byte is 2^bitsDropped steps of the footage.
          'x-bits-dropped': String(display?.bitsDropped ?? 0),
        });
      },
    )
    .delete('/:id', checked('param', z.object({ id: z.string() })), async (c) => {
      await opened.close(c.req.valid('param').id);
      return c.body(null, 204);
    });
}
