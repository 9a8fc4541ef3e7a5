import { type IncomingHttpHeaders, type OutgoingHttpHeaders, request } from 'node:http';

export interface HttpAnswer {
  readonly status: number;
  readonly headers: IncomingHttpHeaders;
  readonly body: string;
}

/** One request over a real connection, with exactly the headers given (fetch would not let a test set Host or Origin). */
export function httpRequest(
  url: string,
  headers: OutgoingHttpHeaders = {},
  method = 'GET',
  body = '',
): Promise<HttpAnswer> {
  return new Promise((resolve, reject) => {
    const asked = request(url, { method, headers, agent: false }, (answer) => {
      const chunks: Buffer[] = [];
      answer.on('data', (chunk: Buffer) => chunks.push(chunk));
      answer.on('error', reject);
      answer.on('end', () =>
        resolve({
          status: answer.statusCode ?? 0,
          headers: answer.headers,
          body: Buffer.concat(chunks).toString('utf8'),
        }),
      );
    });
    asked.on('error', reject);
    asked.end(body);
  });
}
