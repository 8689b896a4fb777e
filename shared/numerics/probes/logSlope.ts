/**
 * Least-squares slope of log y against log x.
 *
 * Formula: sum (X_k - X)(Y_k - Y) / sum (X_k - X)^2 with X_k = log2(x_k / x_1), Y_k = log2(y_k / y_1): ratios, so that
 * powers of two as units change no bit.
 * Shapes: x and y of one length. Units: dimensionless. Domain: positive finite numbers, x distinct. Throws: never.
 * Returns null with fewer than two points, or where a ratio leaves the binary64 range.
 */
export function logSlope(x: readonly number[], y: readonly number[]): number | null {
  if (x.length < 2) return null;
  const logX = x.map((value) => Math.log2(value / x[0]!));
  const logY = y.map((value) => Math.log2(value / y[0]!));
  const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
  const [meanX, meanY] = [mean(logX), mean(logY)];
  let products = 0;
  let squares = 0;
  logX.forEach((value, k) => {
    products += (value - meanX) * (logY[k]! - meanY);
    squares += (value - meanX) ** 2;
  });
  const slope = products / squares;
  return Number.isFinite(slope) ? slope : null;
}
