import { once } from 'node:events';
import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { createAdaptorServer } from '@hono/node-server';
import type { App } from '../api/app.ts';
import { Refusal } from '../refusal.ts';
import { accessGuard } from './accessGuard.ts';

/** Only this address, never a name: `localhost` is looked up, so it can be made to mean something else. */
const address = '127.0.0.1';

export interface Loopback {
  /** `http://127.0.0.1:PORT` */
  readonly url: string;
  /** Opens the window once. */
  readonly launchUrl: string;
  /** Another address that opens the window once; the one before is void. */
  newLaunchUrl(): string;
  /** Whether a window was opened by the newest of these addresses. */
  launched(): boolean;
  /** Ends the server, open answers included, then the app. */
  close(): Promise<void>;
}

/**
 * Serves the app on this machine alone. From another machine it is reached over an SSH tunnel that keeps the port
 * (`ssh -L 8437:127.0.0.1:8437 rig`, with the port fixed here too): the browser then asks for the very Host that is checked.
 *
 * @param options.port  0 takes any free one
 * @throws Refusal (status 2) when the port is taken or not allowed
 */
export async function startLoopback(options: {
  readonly app: App;
  readonly port?: number;
}): Promise<Loopback> {
  const { app, port = 0 } = options;
  const server = createAdaptorServer({
    fetch: (request) => guard.answer(request) ?? app.handle(request),
    overrideGlobalObjects: false, // other hosts expect the genuine Request and Response
  }) as Server;
  server.listen(port, address);
  await once(server, 'listening').catch((error: NodeJS.ErrnoException) => {
    throw new Refusal('portNotFree', 2, `Port ${port} cannot be used (${error.code}); give another or none.`);
  });
  const host = `${address}:${(server.address() as AddressInfo).port}`;
  const guard = accessGuard(host);
  const url = `http://${host}`;
  const newLaunchUrl = () => url + guard.launchPath();
  return {
    url,
    launchUrl: newLaunchUrl(),
    newLaunchUrl,
    launched: guard.launched,
    async close() {
      const closed = once(server, 'close');
      server.close();
      server.closeAllConnections();
      await closed;
      await app.close();
    },
  };
}
