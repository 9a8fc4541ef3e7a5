import { Refused, refusalLine } from './api.ts';

/**
 * The events of an answer with one JSON document per line, as they come.
 *
 * @throws Refused when the answer is a refusal or breaks off in the middle of a line
 */
export async function* eventLines<E>(answer: Response): AsyncGenerator<E> {
  if (!answer.ok) throw new Refused(await refusalLine(answer));
  if (!answer.body) throw new Refused('The program gave an empty answer.');
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
    if (rest !== '') throw new Refused('The connection to the program broke off.');
  } finally {
    await reader.cancel();
  }
}
