/** Where the log density is told, over 0 … 1; between these places it is linear. */
export type Places = Float64Array;

/** For instants: the knot before each and the share of the way to the next. */
export interface Between {
  readonly knot: Int32Array;
  readonly share: Float64Array;
}

export function evenPlaces(count: number): Places {
  return Float64Array.from({ length: count }, (_, k) => k / (count - 1));
}

export function betweenKnots(places: Places, instants: Float64Array): Between {
  const last = places.length - 1;
  const knot = new Int32Array(instants.length);
  const share = new Float64Array(instants.length);
  let k = 0;
  for (let i = 0; i < instants.length; i++) {
    while (k < last - 1 && instants[i] >= places[k + 1]) k++;
    knot[i] = k;
    share[i] = Math.min(1, Math.max(0, (instants[i] - places[k]) / (places[k + 1] - places[k])));
  }
  return { knot, share };
}

/** Values at increasing instants. */
export function interpolated({ knot, share }: Between, values: Float64Array): Float64Array {
  return share.map((s, i) => values[knot[i]] + s * (values[knot[i] + 1] - values[knot[i]]));
}

/** Instants at which a running sum, given at others, reaches even steps; the first and last instants stay. */
export function evenSteps(instants: Float64Array, run: Float64Array, count: number): Float64Array {
  const last = instants.length - 1;
  let k = 0;
  const out = Float64Array.from({ length: count + 1 }, (_, e) => {
    const wanted = (run[last] * e) / count;
    while (k < last - 1 && run[k + 1] < wanted) k++;
    const share = Math.min(1, Math.max(0, (wanted - run[k]) / (run[k + 1] - run[k])));
    return instants[k] + share * (instants[k + 1] - instants[k]);
  });
  out[0] = instants[0];
  out[count] = instants[last];
  return out;
}
