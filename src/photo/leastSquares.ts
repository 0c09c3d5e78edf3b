/**
 * Small weighted linear least squares with Gaussian priors on the coefficients, robust by Huber weights.
 * Written out for up to four coefficients: it runs inside the drag loop of the page.
 */

export interface LinearFit {
  readonly coefficients: readonly number[];
  /** Inverse of the normal matrix: multiply by the residual variance to get the covariance. */
  readonly inverseNormal: readonly (readonly number[])[];
  readonly residuals: Float64Array;
  readonly weights: Float64Array;
  /** Robust standard deviation of the residuals (1.4826 × median absolute residual). */
  readonly robustSigma: number;
  /** Root of the weighted mean square residual. */
  readonly rms: number;
}

export interface Prior {
  readonly mean: number;
  /** Standard deviation; Infinity leaves the coefficient free. */
  readonly sigma: number;
}

/** Inverse of a small symmetric positive matrix by Gauss–Jordan with pivoting; null when singular. */
export function invertSmall(matrix: readonly (readonly number[])[]): number[][] | null {
  const n = matrix.length;
  const a = matrix.map((row, i) => [...row, ...row.map((_, j) => (i === j ? 1 : 0))]);
  for (let column = 0; column < n; column++) {
    let pivot = column;
    for (let row = column + 1; row < n; row++) {
      if (Math.abs(a[row]?.[column] ?? 0) > Math.abs(a[pivot]?.[column] ?? 0)) pivot = row;
    }
    const pivotRow = a[pivot] as number[];
    const divisor = pivotRow[column] as number;
    if (!(Math.abs(divisor) > 1e-14)) return null;
    a[pivot] = a[column] as number[];
    a[column] = pivotRow.map((v) => v / divisor);
    for (let row = 0; row < n; row++) {
      if (row === column) continue;
      const factor = a[row]?.[column] as number;
      if (factor === 0) continue;
      const source = a[column] as number[];
      a[row] = (a[row] as number[]).map((v, j) => v - factor * (source[j] as number));
    }
  }
  return a.map((row) => row.slice(n));
}

export function medianOf(values: ArrayLike<number>): number {
  if (values.length === 0) return Number.NaN;
  const sorted = Float64Array.from(values).sort();
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1
    ? (sorted[middle] as number)
    : ((sorted[middle - 1] as number) + (sorted[middle] as number)) / 2;
}

/**
 * Fits y = Σ cⱼ·columnsⱼ.
 * @param columns one array a coefficient, all as long as `y`
 * @param options.priors one a coefficient, sigma in units of the coefficient
 * @param options.huber limit of the Huber weight in robust sigmas; Infinity for plain least squares (default 2.5)
 * @param options.priorNoise residual standard deviation the priors are weighed against (default: the robust sigma found)
 * @returns null when the points do not determine the coefficients
 */
export function fitLinear(
  columns: readonly ArrayLike<number>[],
  y: ArrayLike<number>,
  options: { readonly priors?: readonly Prior[]; readonly huber?: number; readonly priorNoise?: number } = {},
): LinearFit | null {
  const n = y.length;
  const p = columns.length;
  if (n < p) return null;
  const huber = options.huber ?? 2.5;
  const weights = new Float64Array(n).fill(1);
  const residuals = new Float64Array(n);
  let sigma = options.priorNoise ?? 0;
  let result: { coefficients: number[]; inverse: number[][] } | null = null;
  const rounds = Number.isFinite(huber) ? 6 : 2;
  for (let round = 0; round < rounds; round++) {
    const normal = Array.from({ length: p }, () => new Array<number>(p).fill(0));
    const right = new Array<number>(p).fill(0);
    for (let i = 0; i < n; i++) {
      const w = weights[i] as number;
      for (let j = 0; j < p; j++) {
        const cj = (columns[j] as ArrayLike<number>)[i] as number;
        right[j] = (right[j] as number) + w * cj * (y[i] as number);
        const row = normal[j] as number[];
        for (let k = j; k < p; k++)
          row[k] = (row[k] as number) + w * cj * ((columns[k] as ArrayLike<number>)[i] as number);
      }
    }
    for (let j = 0; j < p; j++) {
      for (let k = 0; k < j; k++) (normal[j] as number[])[k] = (normal[k] as number[])[j] as number;
      const prior = options.priors?.[j];
      if (prior !== undefined && Number.isFinite(prior.sigma)) {
        const strength = (Math.max(sigma, 1e-9) / prior.sigma) ** 2;
        (normal[j] as number[])[j] = ((normal[j] as number[])[j] as number) + strength;
        right[j] = (right[j] as number) + strength * prior.mean;
      }
    }
    const inverse = invertSmall(normal);
    if (inverse === null) return null;
    const coefficients = inverse.map((row) => row.reduce((sum, v, j) => sum + v * (right[j] as number), 0));
    for (let i = 0; i < n; i++) {
      let value = y[i] as number;
      for (let j = 0; j < p; j++)
        value -= (coefficients[j] as number) * ((columns[j] as ArrayLike<number>)[i] as number);
      residuals[i] = value;
    }
    sigma = options.priorNoise ?? Math.max(1e-12, 1.4826 * medianOf(residuals.map(Math.abs)));
    result = { coefficients, inverse };
    if (!Number.isFinite(huber)) continue;
    const scale = Math.max(1e-12, 1.4826 * medianOf(residuals.map(Math.abs)));
    for (let i = 0; i < n; i++) {
      const size = Math.abs(residuals[i] as number) / scale;
      weights[i] = size <= huber ? 1 : huber / size;
    }
  }
  if (result === null) return null;
  let sum = 0;
  let weightSum = 0;
  for (let i = 0; i < n; i++) {
    sum += (weights[i] as number) * (residuals[i] as number) ** 2;
    weightSum += weights[i] as number;
  }
  return {
    coefficients: result.coefficients,
    inverseNormal: result.inverse,
    residuals,
    weights,
    robustSigma: 1.4826 * medianOf(residuals.map(Math.abs)),
    rms: Math.sqrt(sum / Math.max(1e-12, weightSum)),
  };
}

/**
 * Integrated autocorrelation of residuals taken at equal steps: by how much fewer independent points
 * there are than points (n_eff = n / factor). Sum of the autocorrelation up to its first fall below
 * 0.1 (initial-sequence estimate; common practice in time-series analysis), or, when that is larger, the factor of a
 * first-order process with the lag-one correlation corrected for the fit: residuals of a fit with p parameters are less
 * correlated than the errors, by about (p − 1)(1 + 2ρ)/n (Marriott & Pope 1954, Kendall 1954).
 * @param parameters number of fitted parameters
 * @returns ≥ 1
 */
export function correlationFactor(residuals: ArrayLike<number>, parameters = 3): number {
  const n = residuals.length;
  if (n < 4) return 1;
  let mean = 0;
  for (let i = 0; i < n; i++) mean += residuals[i] as number;
  mean /= n;
  let variance = 0;
  for (let i = 0; i < n; i++) variance += ((residuals[i] as number) - mean) ** 2;
  if (!(variance > 0)) return 1;
  let factor = 1;
  for (let lag = 1; lag < n / 2; lag++) {
    let sum = 0;
    for (let i = lag; i < n; i++) sum += ((residuals[i] as number) - mean) * ((residuals[i - lag] as number) - mean);
    const rho = sum / variance;
    if (rho < 0.1) break;
    factor += 2 * rho;
  }
  let lagOne = 0;
  for (let i = 1; i < n; i++) lagOne += ((residuals[i] as number) - mean) * ((residuals[i - 1] as number) - mean);
  const lost = (parameters - 1) / n;
  const corrected = Math.min(0.97, (lagOne / variance + lost) / Math.max(0.2, 1 - 2 * lost));
  return Math.max(1, factor, (1 + corrected) / (1 - corrected));
}
