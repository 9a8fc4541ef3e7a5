/** The events of an NDJSON answer, as they come. Leaving the loop early drops the answer. */
export async function* eventLines<E>(answer: Response): AsyncGenerator<E> {
  if (!answer.body) throw new Error('the answer has no body');
  const reader = answer.body.pipeThrough(new TextDecoderStream()).getReader();
  let rest = '';
  try {
    for (;;) {
      const { done, value } = await reader.read();
      if (done) break;
      const lines = (rest + value).split('\n');
      rest = lines.pop() ?? '';
      for (const line of lines) yield JSON.parse(line) as E;
    }
    if (rest !== '') throw new Error(`the last line has no end: ${rest}`);
  } finally {
    await reader.cancel();
  }
}

export async function allEvents<E>(answer: Response): Promise<E[]> {
  const events: E[] = [];
  for await (const event of eventLines<E>(answer)) events.push(event);
  return events;
}
