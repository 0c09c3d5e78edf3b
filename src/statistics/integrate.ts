/** Nodes and weights of ten-point Gauss–Legendre on (−1, 1), positive half. Abramowitz & Stegun table 25.4. */
const NODES = [0.1488743389816312, 0.4333953941292472, 0.6794095682990244, 0.8650633666889845, 0.9739065285171717];
const WEIGHTS = [0.2955242247147529, 0.2692667193099963, 0.219086362515982, 0.1494513491505806, 0.0666713443086881];

/** ∫ f from a to b in `panels` equal panels; for smooth f the error is far below 1e-10. */
export function integrate(f: (x: number) => number, a: number, b: number, panels = 24): number {
  const half = (b - a) / (2 * panels);
  let sum = 0;
  for (let p = 0; p < panels; p++) {
    const middle = a + (2 * p + 1) * half;
    for (const [i, node] of NODES.entries()) {
      const weight = WEIGHTS[i] ?? 0;
      sum += weight * (f(middle - half * node) + f(middle + half * node));
    }
  }
  return sum * half;
}

/** x in [low, high] with f(x) = 0 for an f that changes sign there once; by bisection, to the last digit but one. */
export function findRoot(f: (x: number) => number, low: number, high: number): number {
  let a = low;
  let b = high;
  const rising = f(b) > 0;
  for (let i = 0; i < 200 && b - a > 1e-13 * Math.max(1, Math.abs(a)); i++) {
    const middle = (a + b) / 2;
    if (f(middle) > 0 === rising) b = middle;
    else a = middle;
  }
  return (a + b) / 2;
}
