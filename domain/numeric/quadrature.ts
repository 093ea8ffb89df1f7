/** Nodes and weights of a quadrature rule. */
export interface QuadratureRule {
  readonly nodes: Float64Array;
  readonly weights: Float64Array;
}

const rules = new Map<number, QuadratureRule>();

/** Gauss-Legendre rule of `count` points on [-1, 1], nodes ascending; exact for polynomials of degree 2 count - 1.
 *  Valid: count >= 1. Newton iteration on the Legendre recurrence from roots of a cosine.
 *  @source AbramowitzStegun1964 25.4.29, 22.7.10 */
export function gaussLegendre(count: number): QuadratureRule {
  const known = rules.get(count);
  if (known) return known;
  const nodes = new Float64Array(count);
  const weights = new Float64Array(count);
  for (let i = 0; 2 * i < count; i++) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (count + 0.5));
    let slope = 1;
    for (let step = 0; step < 100; step++) {
      let below = 1;
      let value = x;
      for (let l = 2; l <= count; l++) {
        const next = ((2 * l - 1) * x * value - (l - 1) * below) / l;
        below = value;
        value = next;
      }
      slope = (count * (below - x * value)) / (1 - x * x);
      const change = value / slope;
      x -= change;
      if (Math.abs(change) < 1e-15) break;
    }
    if (2 * i + 1 === count) x = 0;
    const weight = 2 / ((1 - x * x) * slope * slope);
    nodes[i] = -x;
    nodes[count - 1 - i] = x;
    weights[i] = weight;
    weights[count - 1 - i] = weight;
  }
  const rule = { nodes, weights };
  if (count <= 256) rules.set(count, rule);
  return rule;
}

/** Integral of a smooth function over [from, to] by one Gauss-Legendre rule of `count` points. */
export function integrate(integrand: (x: number) => number, from: number, to: number, count: number): number {
  const { nodes, weights } = gaussLegendre(count);
  const half = (to - from) / 2;
  const middle = (to + from) / 2;
  let sum = 0;
  for (let i = 0; i < count; i++) sum += weights[i]! * integrand(middle + half * nodes[i]!);
  return half * sum;
}
