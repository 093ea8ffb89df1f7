import type { OpticalLayer } from '../../domain/tissue/optical-layer.js';

/** Independent check of the light solver: adding and doubling of reflection and transmission matrices, one index for the whole
 *  stack, air outside, Henyey-Greenstein scattering with delta-M scaling, collimated beam as the node at cosine 1.
 *  Shares no code with the solver. Matrices act on radiances at the nodes, row-major.
 *  @source Prahl1995 (adding-doubling chapter); Wiscombe1976 (diamond initialization) */
export interface AddingDoubling {
  readonly totalReflectance: number;
  readonly transmittance: number;
  /** Fluence rate per incident irradiance at each depth asked for. */
  readonly fluences: number[];
}

export function addingDoubling(layers: readonly OpticalLayer[], depthsUm: readonly number[], perRegion: number): AddingDoubling {
  const index = layers[0]!.refractiveIndex;
  const { mu, weight } = nodes(index, perRegion);
  const n = mu.length;
  const surface = mu.map((cosine) => reflectance(index, cosine));
  const entering = 1 - surface[n - 1]!;

  const slabs: { slab: Slab; top: number; bottom: number }[] = [];
  let top = 0;
  for (const layer of layers) {
    const cuts = [
      top,
      ...depthsUm.filter((d) => d > top && d < top + layer.thicknessUm).sort((a, b) => a - b),
      top + layer.thicknessUm,
    ];
    for (let i = 0; i + 1 < cuts.length; i++) {
      slabs.push({ slab: makeSlab(layer, cuts[i + 1]! - cuts[i]!, mu, weight), top: cuts[i]!, bottom: cuts[i + 1]! });
    }
    top += layer.thicknessUm;
  }
  const face: Slab = { r: diagonal(surface), t: identity(n), back: diagonal(surface), backT: identity(n) };
  const topFace: Slab = { r: zero(n), t: identity(n), back: diagonal(surface), backT: identity(n) };

  const source = new Array<number>(n).fill(0);
  source[n - 1] = entering / (2 * Math.PI * weight[n - 1]!);
  const meet = (above: Slab, below: Slab): { down: number[]; up: number[] } => {
    const loop = subtract(identity(n), multiply(above.back, below.r, n));
    const down = solveVector(loop, apply(above.t, source, n), n);
    return { down, up: apply(below.r, down, n) };
  };
  const upTo = (depth: number): Slab =>
    slabs.filter((s) => s.bottom <= depth).reduce((whole, s) => add(whole, s.slab, n), topFace);
  const from = (depth: number): Slab =>
    slabs.filter((s) => s.top >= depth).reduceRight((whole, s) => add(s.slab, whole, n), { ...face, t: zero(n) });

  const fluenceAt = (depth: number): number => {
    const { down, up } = meet(upTo(depth), from(depth));
    let sum = 0;
    for (let i = 0; i < n; i++) sum += 2 * Math.PI * weight[i]! * (down[i]! + up[i]!);
    return sum;
  };
  const atTop = meet(topFace, from(0));
  const atBottom = meet(upTo(top), { ...face });
  let out = 0;
  let through = 0;
  for (let i = 0; i < n; i++) {
    out += 2 * Math.PI * weight[i]! * mu[i]! * (1 - surface[i]!) * atTop.up[i]!;
    through += 2 * Math.PI * weight[i]! * mu[i]! * (1 - surface[i]!) * atBottom.down[i]!;
  }
  return { totalReflectance: 1 - entering + out, transmittance: through, fluences: depthsUm.map(fluenceAt) };
}

interface Slab {
  /** Reflection and transmission for light from above, then from below. */
  r: number[];
  t: number[];
  back: number[];
  backT: number[];
}

function add(upper: Slab, lower: Slab, n: number): Slab {
  const downLoop = subtract(identity(n), multiply(upper.back, lower.r, n));
  const upLoop = subtract(identity(n), multiply(lower.r, upper.back, n));
  const down = solveMatrix(downLoop, upper.t, n);
  const up = solveMatrix(upLoop, lower.backT, n);
  return {
    r: sum(upper.r, multiply(upper.backT, multiply(lower.r, down, n), n)),
    t: multiply(lower.t, down, n),
    back: sum(lower.back, multiply(lower.t, multiply(upper.back, up, n), n)),
    backT: multiply(upper.backT, up, n),
  };
}

function makeSlab(layer: OpticalLayer, thicknessUm: number, mu: number[], weight: number[]): Slab {
  const n = mu.length;
  const extinction = layer.absorptionPerCm + layer.scatteringPerCm;
  const albedo = layer.scatteringPerCm / extinction;
  const moments = 2 * Math.floor(n / 2);
  const forward = layer.anisotropy ** moments;
  const thickness = extinction * (1 - albedo * forward) * thicknessUm * 1e-4;
  const scaledAlbedo = (albedo * (1 - forward)) / (1 - albedo * forward);
  let doublings = 0;
  while (thickness / 2 ** doublings > 1e-3 * mu[0]!) doublings++;
  const half = thickness / 2 ** doublings / 2;
  const a: number[] = new Array(n * n);
  const b: number[] = new Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      let same = 0;
      let other = 0;
      for (let l = 0; l < moments; l++) {
        const term =
          ((2 * l + 1) * (layer.anisotropy ** l - forward) * legendre(l, mu[i]!) * legendre(l, mu[j]!)) / (1 - forward);
        same += term;
        other += l % 2 === 0 ? term : -term;
      }
      const scale = (scaledAlbedo * weight[j]!) / 2;
      a[i * n + j] = (half * ((i === j ? 1 : 0) - scale * same)) / mu[i]!;
      b[i * n + j] = (half * scale * other) / mu[i]!;
    }
  }
  const onePlus = sum(identity(n), a);
  const inner = solveMatrix(onePlus, b, n);
  const whole = subtract(onePlus, multiply(b, inner, n));
  let t = subtract(
    solveMatrix(
      whole,
      identity(n).map((v) => 2 * v),
      n,
    ),
    identity(n),
  );
  let r = solveMatrix(onePlus, multiply(b, sum(identity(n), t), n), n);
  for (let i = 0; i < doublings; i++) {
    const twice = add({ r, t, back: r, backT: t }, { r, t, back: r, backT: t }, n);
    r = twice.r;
    t = twice.t;
  }
  return { r, t, back: r, backT: t };
}

/** Gauss points up to the critical cosine and Radau points with cosine 1 beyond it, ascending. */
function nodes(index: number, perRegion: number): { mu: number[]; weight: number[] } {
  const critical = index > 1 ? Math.sqrt(1 - 1 / index ** 2) : 0;
  const mu: number[] = [];
  const weight: number[] = [];
  const put = (points: { x: number; w: number }[], low: number, high: number): void => {
    for (const { x, w } of points) {
      mu.push(low + ((high - low) * (x + 1)) / 2);
      weight.push(((high - low) * w) / 2);
    }
  };
  if (critical > 0) put(gaussPoints(perRegion), 0, critical);
  put(radauPoints(critical > 0 ? perRegion : 2 * perRegion), critical, 1);
  return { mu, weight };
}

function gaussPoints(n: number): { x: number; w: number }[] {
  return rootsOf((x) => legendre(n, x), n).map((x) => {
    const slope = (n * (legendre(n - 1, x) - x * legendre(n, x))) / (1 - x * x);
    return { x, w: 2 / ((1 - x * x) * slope * slope) };
  });
}

/** Radau rule with the fixed point +1. */
function radauPoints(n: number): { x: number; w: number }[] {
  const free = rootsOf((x) => (legendre(n - 1, -x) + legendre(n, -x)) / (1 - x), n - 1);
  return [...free.map((x) => ({ x, w: (1 + x) / (n * legendre(n - 1, -x)) ** 2 })), { x: 1, w: 2 / n ** 2 }];
}

function rootsOf(f: (x: number) => number, count: number): number[] {
  const roots: number[] = [];
  const steps = 400 * count;
  for (let i = 0; i < steps; i++) {
    let low = -Math.cos((Math.PI * i) / steps);
    let high = -Math.cos((Math.PI * (i + 1)) / steps);
    if (i + 1 === steps) high = 1 - 1e-12;
    if (f(low) * f(high) > 0) continue;
    for (let k = 0; k < 80; k++) {
      const middle = (low + high) / 2;
      if (f(low) * f(middle) <= 0) high = middle;
      else low = middle;
    }
    roots.push((low + high) / 2);
  }
  if (roots.length !== count) throw new Error(`found ${roots.length} of ${count} roots`);
  return roots;
}

function legendre(l: number, x: number): number {
  let below = 1;
  let value = x;
  if (l === 0) return 1;
  for (let k = 2; k <= l; k++) [below, value] = [value, ((2 * k - 1) * x * value - (k - 1) * below) / k];
  return value;
}

function reflectance(index: number, cosine: number): number {
  const sine = index * Math.sqrt(Math.max(0, 1 - cosine * cosine));
  if (index === 1) return 0;
  if (sine >= 1) return 1;
  if (cosine > 1 - 1e-12) return ((index - 1) / (index + 1)) ** 2;
  const inside = Math.acos(cosine);
  const outside = Math.asin(sine);
  return (
    (Math.sin(inside - outside) ** 2 / Math.sin(inside + outside) ** 2 +
      Math.tan(inside - outside) ** 2 / Math.tan(inside + outside) ** 2) /
    2
  );
}

const identity = (n: number): number[] => diagonal(new Array<number>(n).fill(1));
const zero = (n: number): number[] => new Array<number>(n * n).fill(0);
const sum = (a: number[], b: number[]): number[] => a.map((v, i) => v + b[i]!);
const subtract = (a: number[], b: number[]): number[] => a.map((v, i) => v - b[i]!);

function diagonal(values: number[]): number[] {
  const matrix = zero(values.length);
  for (let i = 0; i < values.length; i++) matrix[i * values.length + i] = values[i]!;
  return matrix;
}

function multiply(a: number[], b: number[], n: number): number[] {
  const product = zero(n);
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < n; k++) {
      const factor = a[i * n + k]!;
      for (let j = 0; j < n; j++) product[i * n + j]! += factor * b[k * n + j]!;
    }
  }
  return product;
}

function apply(a: number[], x: number[], n: number): number[] {
  return x.map((_, i) => x.reduce((total, value, j) => total + a[i * n + j]! * value, 0)).slice(0, n);
}

function solveVector(a: number[], b: number[], n: number): number[] {
  const columns = zero(n);
  for (let i = 0; i < n; i++) columns[i * n] = b[i]!;
  const solved = solveMatrix(a, columns, n);
  return b.map((_, i) => solved[i * n]!);
}

/** a^-1 b by elimination with row pivoting. */
function solveMatrix(a: number[], b: number[], n: number): number[] {
  const left = a.slice();
  const right = b.slice();
  for (let i = 0; i < n; i++) {
    let pivot = i;
    for (let r = i + 1; r < n; r++) if (Math.abs(left[r * n + i]!) > Math.abs(left[pivot * n + i]!)) pivot = r;
    for (let c = 0; c < n; c++) {
      [left[i * n + c], left[pivot * n + c]] = [left[pivot * n + c]!, left[i * n + c]!];
      [right[i * n + c], right[pivot * n + c]] = [right[pivot * n + c]!, right[i * n + c]!];
    }
    for (let r = 0; r < n; r++) {
      if (r === i) continue;
      const factor = left[r * n + i]! / left[i * n + i]!;
      if (factor === 0) continue;
      for (let c = 0; c < n; c++) {
        left[r * n + c]! -= factor * left[i * n + c]!;
        right[r * n + c]! -= factor * right[i * n + c]!;
      }
    }
  }
  for (let i = 0; i < n; i++) for (let c = 0; c < n; c++) right[i * n + c]! /= left[i * n + i]!;
  return right;
}
