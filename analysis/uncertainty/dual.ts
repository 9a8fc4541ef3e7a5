import type { Arithmetic, Operand } from './arithmetic.ts';

/** A number that carries its partial derivatives by n inputs. */
interface Dual {
  readonly value: number;
  /** First derivatives, one for each input. */
  readonly slope: Float64Array;
  /** Second derivatives, row by row (n × n), where they were asked for. */
  readonly curvature: Float64Array | null;
}

/** Dual numbers of a given count of inputs, and the inputs themselves. */
export interface DualNumbers extends Arithmetic<Dual> {
  /** The i-th input: its derivative by itself is 1. */
  input(value: number, i: number): Dual;
}

/**
 * Forward-mode automatic differentiation: exact derivatives, to rounding, of whatever is computed with these numbers. With
 * `second` also the second derivatives (Taylor arithmetic truncated after them).
 *
 * A. Griewank & A. Walther, Evaluating Derivatives, 2nd ed. (2008), chapters 3 and 13.
 *
 * @param n  how many inputs
 * Cost: O(n) for each operation, O(n²) with second derivatives.
 */
export function dualNumbers(n: number, second = false): DualNumbers {
  const flat = () => (second ? new Float64Array(n * n) : null);
  const constant = (value: number): Dual => ({ value, slope: new Float64Array(n), curvature: flat() });
  const lift = (x: Operand<Dual>): Dual => (typeof x === 'number' ? constant(x) : x);
  const plain = (x: Operand<Dual>) => (typeof x === 'number' ? x : x.value);

  /** Adds factor · p qᵀ. Most numbers depend on few inputs: rows of zero are passed over. */
  function addProduct(into: Float64Array, factor: number, p: Float64Array, q: Float64Array): void {
    for (let i = 0; i < n; i++) {
      const scale = factor * p[i];
      if (scale === 0) continue;
      for (let j = 0; j < n; j++) into[i * n + j] += scale * q[j];
    }
  }

  /** h(x) from h, h' and h'' at x. */
  function unary(x: Dual, value: number, first: number, secondDerivative: number): Dual {
    const slope = new Float64Array(n);
    for (let i = 0; i < n; i++) slope[i] = first * x.slope[i];
    if (x.curvature === null) return { value, slope, curvature: null };
    const curvature = new Float64Array(n * n);
    for (let k = 0; k < n * n; k++) curvature[k] = first * x.curvature[k];
    if (secondDerivative !== 0) addProduct(curvature, secondDerivative, x.slope, x.slope);
    return { value, slope, curvature };
  }

  /** h(a, b) from its derivatives by a, b, aa, ab, bb. */
  function binary(
    a: Dual,
    b: Dual,
    value: number,
    [ha, hb, haa, hab, hbb]: readonly [number, number, number, number, number],
  ): Dual {
    const slope = new Float64Array(n);
    for (let i = 0; i < n; i++) slope[i] = ha * a.slope[i] + hb * b.slope[i];
    if (a.curvature === null || b.curvature === null) return { value, slope, curvature: null };
    const curvature = new Float64Array(n * n);
    for (let k = 0; k < n * n; k++) curvature[k] = ha * a.curvature[k] + hb * b.curvature[k];
    if (haa !== 0) addProduct(curvature, haa, a.slope, a.slope);
    if (hbb !== 0) addProduct(curvature, hbb, b.slope, b.slope);
    if (hab !== 0) {
      addProduct(curvature, hab, a.slope, b.slope);
      addProduct(curvature, hab, b.slope, a.slope);
    }
    return { value, slope, curvature };
  }

  const sum = (a: Dual, b: Dual, sign: 1 | -1) => binary(a, b, a.value + sign * b.value, [1, sign, 0, 0, 0]);
  const product = (a: Dual, b: Dual) => binary(a, b, a.value * b.value, [b.value, a.value, 0, 1, 0]);
  // A plain number has no derivatives to carry: most operands of a long computation are plain.
  const scaled = (x: Dual, factor: number) => unary(x, factor * x.value, factor, 0);

  return {
    constant,
    input(value, i) {
      if (!(i >= 0 && i < n)) throw new RangeError(`dualNumbers: input ${i} of ${n}`);
      const x = constant(value);
      x.slope[i] = 1;
      return x;
    },
    valueOf: plain,
    add(...terms) {
      let total = constant(0);
      for (const t of terms) {
        total = typeof t === 'number' ? { ...total, value: total.value + t } : sum(total, t, 1);
      }
      return total;
    },
    subtract(a, b) {
      if (typeof b === 'number')
        return typeof a === 'number' ? constant(a - b) : { ...a, value: a.value - b };
      return sum(lift(a), b, -1);
    },
    multiply(...factors) {
      let plain = 1;
      let total: Dual | null = null;
      for (const f of factors) {
        if (typeof f === 'number') plain *= f;
        else total = total === null ? f : product(total, f);
      }
      if (total === null) return constant(plain);
      return plain === 1 ? total : scaled(total, plain);
    },
    divide(a, b) {
      if (typeof b === 'number') return scaled(lift(a), 1 / b);
      const [p, q] = [plain(a), b.value];
      return binary(lift(a), b, p / q, [1 / q, -p / q ** 2, 0, -1 / q ** 2, (2 * p) / q ** 3]);
    },
    power(x, exponent) {
      const { value } = lift(x);
      const first = exponent === 0 ? 0 : exponent * value ** (exponent - 1);
      const next = exponent === 0 || exponent === 1 ? 0 : exponent * (exponent - 1) * value ** (exponent - 2);
      return unary(lift(x), value ** exponent, first, next);
    },
    sqrt(x) {
      const root = Math.sqrt(plain(x));
      return unary(lift(x), root, 0.5 / root, -0.25 / root ** 3);
    },
    exp(x) {
      const e = Math.exp(plain(x));
      return unary(lift(x), e, e, e);
    },
    log(x) {
      const value = plain(x);
      return unary(lift(x), Math.log(value), 1 / value, -1 / value ** 2);
    },
    sin(x) {
      const [s, c] = [Math.sin(plain(x)), Math.cos(plain(x))];
      return unary(lift(x), s, c, -s);
    },
    cos(x) {
      const [s, c] = [Math.sin(plain(x)), Math.cos(plain(x))];
      return unary(lift(x), c, -s, -c);
    },
    atan2(y, x) {
      const [b, a] = [plain(y), plain(x)];
      const r2 = a * a + b * b;
      const cross = (b * b - a * a) / r2 ** 2;
      const same = (2 * a * b) / r2 ** 2;
      return binary(lift(y), lift(x), Math.atan2(b, a), [a / r2, -b / r2, -same, cross, same]);
    },
    hypot(a, b) {
      const [p, q] = [plain(a), plain(b)];
      const r = Math.hypot(p, q);
      return binary(lift(a), lift(b), r, [
        p / r,
        q / r,
        (q * q) / r ** 3,
        (-p * q) / r ** 3,
        (p * p) / r ** 3,
      ]);
    },
    abs(x) {
      const value = plain(x);
      return unary(lift(x), Math.abs(value), Math.sign(value), 0);
    },
    through(f, x) {
      const value = plain(x);
      // Truncation (h²) and rounding (ε/h²) of the second difference balance near the fourth root of ε.
      const h = 1e-4 * Math.max(Math.abs(value), 1e-12);
      const [low, middle, high] = [f(value - h), f(value), f(value + h)];
      return unary(lift(x), middle, (high - low) / (2 * h), (high - 2 * middle + low) / h ** 2);
    },
  };
}
