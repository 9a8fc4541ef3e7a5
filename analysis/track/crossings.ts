import { type BodyView, secondIsInFront } from './bodyView.ts';
import type { Expected, Follower } from './follow.ts';
import type { Plate } from './match.ts';
import type { Picture } from './track.ts';

/** Pushes frames to followers so that bodies that cross are kept apart: one behind does not see what those in front cover. */
export interface Crossings {
  /** One frame for the followers that are to have it. */
  push(followers: readonly Follower[], n: number, picture: Picture, plateNow: Plate | undefined): void;
}

/** Difference of the sums of squares, in variances of the noise, from which one of two bodies is known to be in front. */
const decided = 40;

/**
 * Two bodies of the same look can only be told apart where they cross by knowing of each other: the one behind would be found on
 * the one in front. Which is in front the pixels say that both would cover, summed up over the frames of the crossing.
 */
export function startCrossings(): Crossings {
  /** Followers whose bodies are near each other → how much better the second explains what both would cover. */
  const evidence = new Map<Follower, Map<Follower, number>>();

  const frontOf = (picture: Picture, a: Follower, b: Follower, n: number): Follower | null => {
    const [atA, atB] = [a.expected(n), b.expected(n)];
    const known = evidence.get(a) ?? new Map<Follower, number>();
    evidence.set(a, known);
    if (!atA || !atB || !mayMeet(atA, atB)) {
      known.delete(b);
      return null;
    }
    const sum = (known.get(b) ?? 0) + secondIsInFront(picture, a.viewAt(atA), b.viewAt(atB));
    known.set(b, sum);
    if (Math.abs(sum) > decided) return sum > 0 ? b : a;
    // Where the frames do not say yet, a body that was seen just now hides one that is out of sight.
    if (atA.reachPx === atB.reachPx) return null;
    return atA.reachPx < atB.reachPx ? a : b;
  };

  return {
    push(followers, n, picture, plateNow) {
      const inFront = new Map<Follower, Follower[]>(followers.map((f) => [f, []]));
      followers.forEach((a, i) => {
        for (const b of followers.slice(i + 1)) {
          const front = frontOf(picture, a, b, n);
          if (front) inFront.get(front === a ? b : a)?.push(front);
        }
      });
      // Those with nothing in front of them first: where they are found is where they cover.
      const pushed = new Set<Follower>();
      const push = (follower: Follower) => {
        if (pushed.has(follower)) return;
        pushed.add(follower);
        const covering = inFront.get(follower) ?? [];
        covering.forEach(push);
        const views = covering.flatMap((f): BodyView[] => {
          const at = f.foundIn(n);
          return at ? [f.viewAt(at)] : [];
        });
        follower.push(n, picture, plateNow, views);
      };
      followers.forEach(push);
    },
  };
}

function mayMeet(a: Expected, b: Expected): boolean {
  const reach = a.half + b.half + Math.max(a.reachPx, b.reachPx);
  return Math.max(Math.abs(a.xPx - b.xPx), Math.abs(a.yPx - b.yPx)) <= reach;
}
