import { protocol } from 'electron';
import type { App } from '../api/app.ts';
import { headersOfEveryAnswer } from '../api/securityHeaders.ts';

const scheme = 'tetherfall';

/** The window's origin: nothing else in the app has it. */
export const windowOrigin = `${scheme}://window`;

/**
 * Makes our scheme one that a page can live on: with an origin, fetch, streams and cached code; neither a way around the content
 * security policy nor reachable from other origins. Must be called before the app is ready, once.
 */
export function registerScheme(): void {
  const privileges = { standard: true, secure: true, supportFetchAPI: true, stream: true, codeCache: true };
  protocol.registerSchemesAsPrivileged([{ scheme, privileges }]);
}

/** Answers our scheme with the app: files to anyone in it, the API to our own window alone. */
export function serveScheme(app: App): void {
  protocol.handle(scheme, (request) => {
    const url = new URL(request.url);
    const { initiatorOrigin } = request as { initiatorOrigin?: string };
    if (url.host !== 'window') return refusal(404, `There is nothing at ${url.host}.`);
    if (url.pathname.startsWith('/api') && initiatorOrigin !== windowOrigin)
      return refusal(403, 'Requests of other pages are not answered.');
    return app.handle(request);
  });
}

function refusal(status: number, message: string): Response {
  const headers = { ...headersOfEveryAnswer, 'content-type': 'text/plain; charset=utf-8' };
  return new Response(`${message}\n`, { status, headers });
}
