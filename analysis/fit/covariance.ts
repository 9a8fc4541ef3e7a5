import { Matrix, SingularValueDecomposition } from 'ml-matrix';
import { triangular } from './triangular.ts';

/** Singular values of the scaled derivatives below this share of the largest are rounding: their direction is not settled. */
const leastShare = 1e-12;
/** A parameter that takes part in an unsettled direction by more than this share is unsettled itself. */
const takesPart = 1e-6;

/**
 * (JᵀJ)⁻¹ of the parameters in `free`, by singular values of the column-scaled triangle, so that units do not matter; 0 for the
 * others, infinite variances where the residuals do not settle a parameter.
 */
export function covarianceOf(jacobian: readonly Float64Array[], free: ReadonlySet<number>): Float64Array[] {
  const n = jacobian.length;
  const covariance = Array.from({ length: n }, () => new Float64Array(n));
  const used = Array.from(free).sort((a, b) => a - b);
  const settled = used.filter((j) => jacobian[j].some((value) => value !== 0));
  for (const j of used) if (!settled.includes(j)) covariance[j][j] = Number.POSITIVE_INFINITY;
  if (settled.length === 0) return covariance;
  const { values, vectors, scale } = scaledSingular(settled.map((j) => jacobian[j]));
  const kept = values.map((value) => value > leastShare * values[0]);
  settled.forEach((j, a) => {
    settled.forEach((k, b) => {
      let sum = 0;
      for (let i = 0; i < values.length; i++) {
        if (kept[i]) sum += (vectors.get(a, i) * vectors.get(b, i)) / (values[i] * values[i]);
        else if (a === b && Math.abs(vectors.get(a, i)) > takesPart) sum = Number.POSITIVE_INFINITY;
      }
      covariance[j][k] = sum / (scale[a] * scale[b]);
    });
  });
  return covariance;
}

/** Singular values of derivatives whose columns were brought to unit length, largest first. */
function scaledSingular(columns: readonly Float64Array[]): {
  readonly values: readonly number[];
  readonly vectors: Matrix;
  readonly scale: readonly number[];
} {
  const scale = columns.map((column) => Math.sqrt(column.reduce((sum, value) => sum + value * value, 0)));
  const { r } = triangular(
    columns.map((column, j) => column.map((value) => value / scale[j])),
    new Float64Array(columns[0].length),
  );
  const svd = new SingularValueDecomposition(new Matrix(r.map((row) => Array.from(row))));
  return { values: svd.diagonal, vectors: svd.rightSingularVectors, scale };
}
