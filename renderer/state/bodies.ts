import type { DraftBody } from './draft.ts';

/** A name that no body has yet. */
export function freshBodyId(bodies: readonly DraftBody[]): string {
  for (let n = 1; ; n++) {
    const id = `other${n}`;
    if (!bodies.some((b) => b.id === id)) return id;
  }
}
