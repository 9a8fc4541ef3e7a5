/**
 * Smoother of a value whose third derivative is white noise of density q: its mean is the smoothing spline of degree 5 (Wahba, J. R.
 * Statist. Soc. B 40 (1978) 364). Square-root information form by Householder reflections, without any prior for the start, so that
 * neither a very smooth curve nor the ends lose digits (a covariance filter with a diffuse start does).
 */
export interface IntegratedWalk {
  readonly position: Float64Array;
  readonly velocity: Float64Array;
  readonly acceleration: Float64Array;
  /** Variances of the three given the data, for the stated u and q. */
  readonly variancePosition: Float64Array;
  readonly varianceVelocity: Float64Array;
  readonly varianceAcceleration: Float64Array;
}

// Inverse Cholesky factor of the process covariance over a unit step: Q = ∫ (1 - s)^(4 - a - b) / ((2 - a)! (2 - b)!) ds.
const rootInverse = inverseCholesky([
  [1 / 20, 1 / 8, 1 / 6],
  [1 / 8, 1 / 3, 1 / 2],
  [1 / 6, 1 / 2, 1],
]);

const columns = 7;
/** Per step: A (3 × 3, upper), B (3 × 3), c (3): A s_i + B s_{i+1} = c + unit noise. */
const perStep = 21;

/**
 * @param time   n times, at least 3, strictly increasing; best in units of a step, so that no power is far from 1
 * @param u      standard uncertainties of the values
 * @param q      density of the third derivative [value² / time⁵]
 * Cost O(n), some 400 products each.
 */
export function integratedWalk(
  time: Float64Array,
  values: Float64Array,
  u: Float64Array,
  q: number,
): IntegratedWalk {
  const n = time.length;
  const steps = new Float64Array(n * perStep);
  const m = new Float64Array(7 * columns);
  let filtered: number[] = new Array(12).fill(0); // R (3 × 3) and z of what the points so far say of the state
  for (let i = 0; i + 1 < n; i++) {
    m.fill(0);
    writeProcess(m, time[i + 1] - time[i], q);
    m[3 * columns] = 1 / u[i];
    m[3 * columns + 6] = values[i] / u[i];
    for (let r = 0; r < 3; r++) {
      for (let k = 0; k < 3; k++) m[(4 + r) * columns + k] = filtered[r * 4 + k];
      m[(4 + r) * columns + 6] = filtered[r * 4 + 3];
    }
    triangularise(m, 7, columns, 6);
    for (let r = 0; r < 3; r++) {
      for (let k = 0; k < 3; k++) {
        steps[i * perStep + r * 3 + k] = m[r * columns + k];
        steps[i * perStep + 9 + r * 3 + k] = m[r * columns + 3 + k];
        filtered[r * 4 + k] = m[(3 + r) * columns + 3 + k];
      }
      steps[i * perStep + 18 + r] = m[r * columns + 6];
      filtered[r * 4 + 3] = m[(3 + r) * columns + 6];
    }
  }
  const last = new Float64Array([1 / u[n - 1], 0, 0, values[n - 1] / u[n - 1], ...filtered]);
  triangularise(last, 4, 4, 3);
  filtered = Array.from(last.slice(0, 12));
  return backward(n, steps, filtered);
}

function backward(n: number, steps: Float64Array, end: readonly number[]): IntegratedWalk {
  const blank = () => new Float64Array(n);
  const out: IntegratedWalk = {
    position: blank(),
    velocity: blank(),
    acceleration: blank(),
    variancePosition: blank(),
    varianceVelocity: blank(),
    varianceAcceleration: blank(),
  };
  const factor = new Float64Array(9);
  const right = new Float64Array(3);
  const state = new Float64Array(3);
  const inverse = new Float64Array(9);
  let covariance = new Float64Array(9);
  for (let i = n - 1; i >= 0; i--) {
    const inner = new Float64Array([1, 0, 0, 0, 1, 0, 0, 0, 1]);
    if (i === n - 1) {
      for (let r = 0; r < 3; r++) {
        for (let k = 0; k < 3; k++) factor[r * 3 + k] = end[r * 4 + k];
        right[r] = end[r * 4 + 3];
      }
    } else {
      const at = i * perStep;
      const b = steps.subarray(at + 9, at + 18);
      for (let r = 0; r < 3; r++) {
        right[r] = steps[at + 18 + r];
        for (let k = 0; k < 3; k++) {
          factor[r * 3 + k] = steps[at + r * 3 + k];
          right[r] -= b[r * 3 + k] * state[k];
        }
      }
      addSandwich(inner, b, covariance);
    }
    invertUpper(factor, inverse);
    for (let r = 0; r < 3; r++) {
      state[r] = 0;
      for (let k = r; k < 3; k++) state[r] += inverse[r * 3 + k] * right[k];
    }
    covariance = new Float64Array(9);
    addSandwich(covariance, inverse, inner);
    out.position[i] = state[0];
    out.velocity[i] = state[1];
    out.acceleration[i] = state[2];
    out.variancePosition[i] = covariance[0];
    out.varianceVelocity[i] = covariance[4];
    out.varianceAcceleration[i] = covariance[8];
  }
  return out;
}

/** Rows of L⁻¹(s_{i+1} - Φ s_i)/√q ~ N(0, 1): the factor of a step h is that of a unit step with its rows scaled by powers of h. */
function writeProcess(m: Float64Array, h: number, q: number): void {
  const scale = [1 / Math.sqrt(q * h ** 5), 1 / Math.sqrt(q * h ** 3), 1 / Math.sqrt(q * h)];
  for (let r = 0; r < 3; r++) {
    const [a, b, c] = [0, 1, 2].map((k) => rootInverse[r * 3 + k] * scale[k]);
    m[r * columns] = -a;
    m[r * columns + 1] = -a * h - b;
    m[r * columns + 2] = (-a * h * h) / 2 - b * h - c;
    m[r * columns + 3] = a;
    m[r * columns + 4] = b;
    m[r * columns + 5] = c;
  }
}

/** Upper triangle in the first columns by Householder reflections, in place (Golub & Van Loan, section 5.2). */
function triangularise(m: Float64Array, rows: number, width: number, eliminated: number): void {
  for (let k = 0; k < eliminated && k < rows - 1; k++) {
    let norm = 0;
    for (let r = k; r < rows; r++) norm = Math.hypot(norm, m[r * width + k]);
    if (norm === 0) continue;
    const pivot = m[k * width + k];
    const head = pivot + (pivot >= 0 ? norm : -norm);
    let squares = head * head;
    for (let r = k + 1; r < rows; r++) squares += m[r * width + k] ** 2;
    for (let c = k + 1; c < width; c++) {
      let dot = head * m[k * width + c];
      for (let r = k + 1; r < rows; r++) dot += m[r * width + k] * m[r * width + c];
      const f = (2 * dot) / squares;
      m[k * width + c] -= f * head;
      for (let r = k + 1; r < rows; r++) m[r * width + c] -= f * m[r * width + k];
    }
    m[k * width + k] = pivot >= 0 ? -norm : norm;
    for (let r = k + 1; r < rows; r++) m[r * width + k] = 0;
  }
}

/** target += F S Fᵀ, all 3 × 3. */
function addSandwich(target: Float64Array, f: Float64Array, s: Float64Array): void {
  for (let a = 0; a < 3; a++)
    for (let b = 0; b < 3; b++) {
      let sum = 0;
      for (let j = 0; j < 3; j++)
        for (let k = 0; k < 3; k++) sum += f[a * 3 + j] * s[j * 3 + k] * f[b * 3 + k];
      target[a * 3 + b] += sum;
    }
}

function invertUpper(a: Float64Array, into: Float64Array): void {
  into.fill(0);
  into[0] = 1 / a[0];
  into[4] = 1 / a[4];
  into[8] = 1 / a[8];
  into[1] = -a[1] * into[4] * into[0];
  into[5] = -a[5] * into[8] * into[4];
  into[2] = -(a[1] * into[5] + a[2] * into[8]) * into[0];
}

function inverseCholesky(s: readonly (readonly number[])[]): Float64Array {
  const l00 = Math.sqrt(s[0][0]);
  const l10 = s[1][0] / l00;
  const l20 = s[2][0] / l00;
  const l11 = Math.sqrt(s[1][1] - l10 * l10);
  const l21 = (s[2][1] - l20 * l10) / l11;
  const l22 = Math.sqrt(s[2][2] - l20 * l20 - l21 * l21);
  const i10 = -l10 / (l00 * l11);
  return Float64Array.of(
    1 / l00,
    0,
    0,
    i10,
    1 / l11,
    0,
    (-l20 / l00 - l21 * i10) / l22,
    -l21 / (l11 * l22),
    1 / l22,
  );
}
