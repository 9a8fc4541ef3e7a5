/** A number of whatever kind, or a plain one beside it. */
export type Operand<T> = T | number;

/**
 * The arithmetic in which a measurement function is written, so that one text of it serves plain numbers (value, Monte Carlo)
 * and dual numbers (sensitivities). Every operation takes plain numbers beside `T`.
 */
export interface Arithmetic<T> {
  constant(value: number): T;
  valueOf(x: Operand<T>): number;
  add(...terms: readonly Operand<T>[]): T;
  subtract(a: Operand<T>, b: Operand<T>): T;
  multiply(...factors: readonly Operand<T>[]): T;
  divide(a: Operand<T>, b: Operand<T>): T;
  power(x: Operand<T>, exponent: number): T;
  sqrt(x: Operand<T>): T;
  exp(x: Operand<T>): T;
  log(x: Operand<T>): T;
  sin(x: Operand<T>): T;
  cos(x: Operand<T>): T;
  atan2(y: Operand<T>, x: Operand<T>): T;
  hypot(a: Operand<T>, b: Operand<T>): T;
  abs(x: Operand<T>): T;
  /** A smooth function that exists for plain numbers only (a table, a correlation): its derivatives by differences. */
  through(f: (x: number) => number, x: Operand<T>): T;
}

/** Plain numbers. */
export const plainNumbers: Arithmetic<number> = {
  constant: (value) => value,
  valueOf: (x) => x,
  add: (...terms) => {
    let sum = 0;
    for (const term of terms) sum += term;
    return sum;
  },
  subtract: (a, b) => a - b,
  multiply: (...factors) => {
    let product = 1;
    for (const factor of factors) product *= factor;
    return product;
  },
  divide: (a, b) => a / b,
  power: (x, exponent) => x ** exponent,
  sqrt: Math.sqrt,
  exp: Math.exp,
  log: Math.log,
  sin: Math.sin,
  cos: Math.cos,
  atan2: Math.atan2,
  hypot: (a, b) => Math.hypot(a, b),
  abs: Math.abs,
  through: (f, x) => f(x),
};
