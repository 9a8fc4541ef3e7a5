import { randomBytes, timingSafeEqual } from 'node:crypto';
import { headersOfEveryAnswer } from '../api/securityHeaders.ts';

const lifeOfCookie = 'Path=/; HttpOnly; SameSite=Strict';

/** Lets through only requests of the window that was launched by whoever started the program. */
export interface AccessGuard {
  /** The answer to a request that is not let through (or that launches the window), null for one that is. */
  answer(request: Request): Response | null;
  /** A path with a token that opens the window once. Asking again gives a new one; the one before is void. */
  launchPath(): string;
  /** Whether a window was opened by the newest launch path. */
  launched(): boolean;
}

/**
 * Any page in any browser on this machine can send requests to 127.0.0.1, and a name that an attacker owns can be made to point
 * there. Hence four checks: the Host is the address itself (no name can be), the Origin is absent or ours, fetch metadata says
 * same-origin or typed by the user, and a cookie with a secret of 256 bits made at this start.
 *
 * @param host  host and port as the browser must ask for them, `127.0.0.1:PORT`
 */
export function accessGuard(host: string): AccessGuard {
  const secret = newSecret();
  // Browsers keep cookies by name and address, not by port: two programs running at once must not share one.
  const cookieName = `tetherfall-${host.split(':').at(-1)}`;
  let launchToken: string | null = newSecret();

  const launch = (url: URL): Response => {
    const token = url.searchParams.get('t') ?? '';
    if (launchToken === null || !sameSecret(token, launchToken))
      return refusal(
        403,
        'This address opens the window once. Look for a new one where the program was started.',
      );
    launchToken = null;
    return answerWith(303, null, { location: '/', 'set-cookie': `${cookieName}=${secret}; ${lifeOfCookie}` });
  };

  return {
    answer(request) {
      const { headers } = request;
      if (headers.get('host') !== host) return refusal(421, `This program answers at http://${host} only.`);
      const origin = headers.get('origin');
      if (origin !== null && origin !== `http://${host}`)
        return refusal(403, 'Requests of other pages are not answered.');
      const site = headers.get('sec-fetch-site');
      if (site !== null && site !== 'same-origin' && site !== 'none')
        return refusal(403, 'Requests of other pages are not answered.');
      const url = new URL(request.url);
      if (url.pathname === '/launch' && request.method === 'GET') {
        // A browser that loads a page ahead of time must not use the token up.
        if (headers.has('sec-purpose')) return refusal(403, 'This address opens the window once.');
        return launch(url);
      }
      if (!sameSecret(cookieOf(headers, cookieName), secret))
        return refusal(403, 'Open the window by the address that is shown where the program was started.');
      return null;
    },
    launchPath() {
      launchToken = newSecret();
      return `/launch?t=${launchToken}`;
    },
    launched: () => launchToken === null,
  };
}

/** 256 bits from the system's generator. */
function newSecret(): string {
  return randomBytes(32).toString('base64url');
}

function cookieOf(headers: Headers, cookieName: string): string {
  const pairs = (headers.get('cookie') ?? '').split(';').map((pair) => pair.trim());
  return pairs.find((pair) => pair.startsWith(`${cookieName}=`))?.slice(cookieName.length + 1) ?? '';
}

/** Takes the same time wherever the two differ; their length is no secret. */
function sameSecret(given: string, secret: string): boolean {
  const a = Buffer.from(given);
  const b = Buffer.from(secret);
  return a.length === b.length && timingSafeEqual(a, b);
}

function refusal(status: number, message: string): Response {
  return answerWith(status, `${message}\n`, { 'content-type': 'text/plain; charset=utf-8' });
}

function answerWith(status: number, body: string | null, headers: Record<string, string>): Response {
  return new Response(body, {
    status,
    headers: { ...headersOfEveryAnswer, 'cache-control': 'no-store', ...headers },
  });
}
