/**
 * Where a coordinate will be one or more frames on: least-squares parabola (constant acceleration) through its last places.
 *
 * @param frames  frame numbers of the last places, ascending, at least one
 * @param values  the places [px]
 * @param frame   the frame asked for
 * @returns the place and its rate per frame there
 */
export function predict(
  frames: readonly number[],
  values: readonly number[],
  frame: number,
): { value: number; rate: number } {
  const n = frames.length;
  const last = frames[n - 1];
  if (n === 1) return { value: values[0], rate: 0 };
  if (n === 2) {
    const rate = (values[1] - values[0]) / (frames[1] - frames[0]);
    return { value: values[1] + rate * (frame - last), rate };
  }
  // Normal equations of v = a + b t + c t² with t counted from the last place.
  let s1 = 0;
  let s2 = 0;
  let s3 = 0;
  let s4 = 0;
  let v0 = 0;
  let v1 = 0;
  let v2 = 0;
  for (let i = 0; i < n; i++) {
    const t = frames[i] - last;
    s1 += t;
    s2 += t * t;
    s3 += t * t * t;
    s4 += t * t * t * t;
    v0 += values[i];
    v1 += t * values[i];
    v2 += t * t * values[i];
  }
  const det = n * (s2 * s4 - s3 * s3) - s1 * (s1 * s4 - s2 * s3) + s2 * (s1 * s3 - s2 * s2);
  const a = (v0 * (s2 * s4 - s3 * s3) - s1 * (v1 * s4 - v2 * s3) + s2 * (v1 * s3 - v2 * s2)) / det;
  const b = (n * (v1 * s4 - v2 * s3) - v0 * (s1 * s4 - s2 * s3) + s2 * (s1 * v2 - s2 * v1)) / det;
  const c = (n * (s2 * v2 - s3 * v1) - s1 * (s1 * v2 - s2 * v1) + v0 * (s1 * s3 - s2 * s2)) / det;
  const t = frame - last;
  return { value: a + b * t + c * t * t, rate: b + 2 * c * t };
}

/** Where a slowly changing value will be: the straight line through its first and last places. */
export function predictLine(frames: readonly number[], values: readonly number[], frame: number): number {
  const n = frames.length;
  const rate = (values[n - 1] - values[0]) / (frames[n - 1] - frames[0]);
  return values[n - 1] + rate * (frame - frames[n - 1]);
}
