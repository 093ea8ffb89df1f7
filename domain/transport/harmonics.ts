/** Real spherical harmonics up to an odd degree, symmetric about the plane of the beam axis and one lateral direction:
 *  Ybar_lm(mu) c_m(phi), with Ybar normalized over mu in [-1, 1] and c_0 = 1, c_m = sqrt(2) cos(m phi).
 *  A radiance that varies like exp(i k x) is kept with factors i^m taken out, which makes everything real.
 *  Shape: entry (l, m) stands at l (l + 1)/2 + m. @source Davison1957 (method of spherical harmonics) */
export interface Harmonics {
  readonly degree: number;
  readonly count: number;
  /** Modes that travel each way: as many as harmonics odd under reflection of depth (l + m odd). */
  readonly modeCount: number;
  readonly degrees: readonly number[];
  readonly orders: readonly number[];
  readonly oddPositions: readonly number[];
  /** Sign of each harmonic under reflection of depth. */
  readonly reflectionSigns: Float64Array;
  /** For each odd harmonic, the positions of all harmonics of its order: the only ones that a face couples with it. */
  readonly testedPositions: readonly Int32Array[];
  /** Per degree l and target order m: couplings to (l + 1, m) from (l, m), (l, m - 1) and (l, m + 1). */
  readonly raising: readonly Float64Array[];
}

export function harmonicPosition(l: number, m: number): number {
  return (l * (l + 1)) / 2 + m;
}

/** Coupling of (l, m) with (l - 1, m) by the cosine of depth. */
export function axialCoupling(l: number, m: number): number {
  return Math.sqrt((l * l - m * m) / (4 * l * l - 1));
}

/** Coupling of (l, m) with (l + 1, m + side) by the lateral direction, side = +1 or -1, its sign left out. */
export function lateralCoupling(l: number, m: number, side: 1 | -1): number {
  const turned = side * m;
  const share = Math.min(m, m + side) === 0 ? Math.SQRT1_2 : 0.5;
  return share * Math.sqrt(((l + turned + 1) * (l + turned + 2)) / ((2 * l + 1) * (2 * l + 3)));
}

const known = new Map<number, Harmonics>();

/** Index tables of all harmonics up to `degree`. Valid: odd degree >= 1. */
export function harmonicsUpTo(degree: number): Harmonics {
  let harmonics = known.get(degree);
  if (!harmonics) {
    harmonics = listHarmonics(degree);
    known.set(degree, harmonics);
  }
  return harmonics;
}

function listHarmonics(degree: number): Harmonics {
  const members: { l: number; m: number }[] = [];
  for (let l = 0; l <= degree; l++) for (let m = 0; m <= l; m++) members.push({ l, m });
  const odd = members.flatMap(({ l, m }, i) => ((l + m) % 2 === 1 ? [i] : []));
  return {
    degree,
    count: members.length,
    modeCount: odd.length,
    degrees: members.map(({ l }) => l),
    orders: members.map(({ m }) => m),
    oddPositions: odd,
    reflectionSigns: Float64Array.from(members, ({ l, m }) => ((l + m) % 2 === 0 ? 1 : -1)),
    testedPositions: odd.map((tested) => Int32Array.from(members.flatMap(({ m }, i) => (m === members[tested]!.m ? [i] : [])))),
    raising: Array.from({ length: degree }, (_, l) =>
      Float64Array.from({ length: 3 * (l + 2) }, (_, i) => {
        const m = Math.floor(i / 3);
        if (i % 3 === 0) return m <= l ? axialCoupling(l + 1, m) : 0;
        if (i % 3 === 1) return m >= 1 ? lateralCoupling(l, m - 1, 1) : 0;
        return m + 1 <= l ? lateralCoupling(l, m + 1, -1) : 0;
      }),
    ),
  };
}

/** Raises a function of degree l to degree l + 1: the part of that degree of (axial mu + lateral direction) times it,
 *  times `factor`, written into the block of degree l + 1 of `result`. */
export function raiseDegree(
  { raising }: Harmonics,
  values: Float64Array,
  l: number,
  axial: number,
  lateral: number,
  result: Float64Array,
  factor: number,
): void {
  const from = harmonicPosition(l, 0);
  const to = harmonicPosition(l + 1, 0);
  const table = raising[l]!;
  for (let m = 0; m <= l + 1; m++) {
    let sum = 0;
    if (m <= l) sum += axial * table[3 * m]! * values[from + m]!;
    if (m >= 1) sum += lateral * table[3 * m + 1]! * values[from + m - 1]!;
    if (m + 1 <= l) sum += lateral * table[3 * m + 2]! * values[from + m + 1]!;
    result[to + m] = sum * factor;
  }
}

/** Values of every Ybar_lm at cosine mu, 0 <= mu <= 1, written into `result`. */
export function harmonicsAt({ degree }: Harmonics, mu: number, result: Float64Array): void {
  const sine = Math.sqrt(Math.max(0, 1 - mu * mu));
  let sectoral = Math.SQRT1_2;
  for (let m = 0; m <= degree; m++) {
    if (m > 0) sectoral *= sine * Math.sqrt((2 * m + 1) / (2 * m));
    let below = 0;
    let value = sectoral;
    for (let l = m; l <= degree; l++) {
      result[harmonicPosition(l, m)] = value;
      const next = (mu * value - (l > m ? axialCoupling(l, m) * below : 0)) / axialCoupling(l + 1, m);
      below = value;
      value = next;
    }
  }
}
