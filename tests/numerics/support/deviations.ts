/**
 * Standard deviations of least-squares parameters from the Jacobian of the residuals:
 * sd_j = sqrt([(J^T J)^-1]_jj rss / (n - p)), by modified Gram-Schmidt with a second pass on columns of unit length,
 * so that J^T J is never formed.
 */
export function parameterDeviations(jacobian: readonly (readonly number[])[], rss: number): number[] {
  const count = jacobian[0]?.length ?? 0;
  const columns = Array.from({ length: count }, (_, j) => jacobian.map((row) => row[j] ?? NaN));
  const lengths = columns.map(norm);
  const q = columns.map((column, j) => column.map((value) => value / (lengths[j] ?? NaN)));
  const r = q.map(() => new Float64Array(count));
  q.forEach((column, j) => {
    for (const pass of [0, 1]) {
      for (let k = 0; k < j; k += 1) {
        const share = dot(q[k] ?? [], column);
        subtract(column, q[k] ?? [], share);
        add(r[k], j, share, pass);
      }
    }
    const length = norm(column);
    add(r[j], j, length, 0);
    column.forEach((value, i) => (column[i] = value / length));
  });
  const variance = rss / (jacobian.length - count);
  return invertUpper(r).map((row, j) => (norm([...row]) * Math.sqrt(variance)) / (lengths[j] ?? NaN));
}

const dot = (a: readonly number[], b: readonly number[]): number => a.reduce((sum, v, i) => sum + v * (b[i] ?? NaN), 0);
const norm = (a: readonly number[]): number => Math.sqrt(dot(a, a));

function subtract(column: number[], other: readonly number[], share: number): void {
  other.forEach((value, i) => (column[i] = (column[i] ?? NaN) - share * value));
}

function add(row: Float64Array | undefined, j: number, share: number, pass: number): void {
  if (row !== undefined) row[j] = (pass === 0 ? 0 : (row[j] ?? NaN)) + share;
}

/** Inverse of an upper triangular matrix, row by row from the last. */
function invertUpper(r: readonly Float64Array[]): Float64Array[] {
  const inverse = r.map(() => new Float64Array(r.length));
  for (let i = r.length - 1; i >= 0; i -= 1) {
    const row = r[i] ?? new Float64Array(0);
    const diagonal = row[i] ?? NaN;
    const result = inverse[i] ?? new Float64Array(0);
    result[i] = 1 / diagonal;
    for (let j = i + 1; j < r.length; j += 1) {
      let sum = 0;
      for (let k = i + 1; k <= j; k += 1) sum += (row[k] ?? NaN) * (inverse[k]?.[j] ?? NaN);
      result[j] = -sum / diagonal;
    }
  }
  return inverse;
}
