const encoder = new TextEncoder();

/**
 * An answer of one JSON document per line (NDJSON), sent as they come. `run` says events with `send`; the stream ends when it
 * settles. When the reader goes away, the signal is aborted (never rely on `request.signal`: a host may not have one).
 */
export function eventStream<E>(
  run: (send: (event: E) => void, signal: AbortSignal) => Promise<void>,
): Response {
  const gone = new AbortController();
  const body = new ReadableStream<Uint8Array>({
    start(controller) {
      const send = (event: E) => {
        if (!gone.signal.aborted) controller.enqueue(encoder.encode(`${JSON.stringify(event)}\n`));
      };
      run(send, gone.signal).then(
        () => {
          if (!gone.signal.aborted) controller.close();
        },
        (error: unknown) => {
          if (!gone.signal.aborted) controller.error(error);
        },
      );
    },
    cancel() {
      gone.abort();
    },
  });
  return new Response(body, {
    headers: { 'content-type': 'application/x-ndjson', 'cache-control': 'no-store' },
  });
}
