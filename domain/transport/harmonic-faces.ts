import { gaussLegendre } from '../numeric/quadrature.js';
import { fresnelReflectance } from './fresnel.js';
import { type Harmonics, harmonicsAt } from './harmonics.js';

/** Condition on the light that leaves a face into one medium: own moments plus those of the medium beyond vanish.
 *  Shape: one row per odd harmonic (the test functions) x one column per harmonic, row-major. */
export interface FaceCondition {
  readonly own: Float64Array;
  readonly beyond: Float64Array;
}

/** Marshak's condition with Fresnel reflection and refraction, on radiance over n^2: in the half-space of directions that leave
 *  the face, the moments of what leaves equal those of what is reflected plus what comes through.
 *  `downward` tells whether the medium lies below the face. The integral over cosines is cut at the critical angle.
 *  @source Marshak1947; Haskell1994 (partial reflection) */
export function faceCondition(harmonics: Harmonics, ownIndex: number, beyondIndex: number, downward: boolean): FaceCondition {
  const { degree, count, modeCount, oddPositions, reflectionSigns, testedPositions } = harmonics;
  const points = degree + 9; // per smooth piece; moments of the reflectance good to 1e-6
  const own = new Float64Array(modeCount * count);
  const beyond = new Float64Array(modeCount * count);
  const here = new Float64Array(count);
  const there = new Float64Array(count);
  const { nodes, weights } = gaussLegendre(points);
  const critical = ownIndex > beyondIndex ? Math.sqrt(1 - (beyondIndex / ownIndex) ** 2) : 0;

  const add = (mu: number, muBeyond: number, reflectance: number, step: number): void => {
    harmonicsAt(harmonics, mu, here);
    harmonicsAt(harmonics, muBeyond, there);
    for (let row = 0; row < modeCount; row++) {
      const tested = oddPositions[row]!;
      const weight = step * here[tested]!;
      for (const i of testedPositions[row]!) {
        const parity = reflectionSigns[i]!;
        const leaving = downward ? 1 : parity;
        const arriving = downward ? parity : 1;
        own[row * count + i]! += weight * here[i]! * (leaving - reflectance * arriving);
        beyond[row * count + i]! -= weight * there[i]! * (1 - reflectance) * leaving;
      }
    }
  };
  for (let q = 0; q < points; q++) {
    const x = (1 + nodes[q]!) / 2;
    if (critical > 0) add(critical * x, 0, 1, (critical * weights[q]!) / 2);
    // beyond the critical angle the cosine in the rarer medium is the smooth variable
    if (ownIndex >= beyondIndex) {
      const ratio = beyondIndex / ownIndex;
      const mu = Math.sqrt(1 - ratio * ratio * (1 - x * x));
      add(mu, x, fresnelReflectance(ownIndex, beyondIndex, mu), (ratio * ratio * x * weights[q]!) / (2 * mu));
    } else {
      const ratio = ownIndex / beyondIndex;
      add(x, Math.sqrt(1 - ratio * ratio * (1 - x * x)), fresnelReflectance(ownIndex, beyondIndex, x), weights[q]! / 2);
    }
  }
  return { own, beyond };
}

/** Condition at a face beyond which nothing scatters: what leaves is what `reflectance` sends back. `edges` are the values of
 *  n sin(theta) at which it has a kink. Shape and weights as in `faceCondition`. */
export function outerCondition(
  harmonics: Harmonics,
  ownIndex: number,
  edges: readonly number[],
  reflectance: (invariant: number) => number,
  downward: boolean,
): Float64Array {
  const { count, modeCount, oddPositions, reflectionSigns, testedPositions } = harmonics;
  const own = new Float64Array(modeCount * count);
  const values = new Float64Array(count);
  const cuts = [0, ...edges.filter((edge) => edge < ownIndex).sort((a, b) => a - b), ownIndex];
  const { nodes, weights } = gaussLegendre(24);
  for (let piece = 0; piece + 1 < cuts.length; piece++) {
    // the cosine in a medium whose critical angle ends the piece is the smooth variable
    const greatest = Math.sqrt(1 - (cuts[piece]! / cuts[piece + 1]!) ** 2);
    for (const [q, node] of nodes.entries()) {
      const cosine = (greatest * (1 + node)) / 2;
      const invariant = cuts[piece + 1]! * Math.sqrt(1 - cosine * cosine);
      const mu = Math.sqrt(Math.max(0, 1 - (invariant / ownIndex) ** 2));
      const step = ((cuts[piece + 1]! / ownIndex) ** 2 * cosine * greatest * weights[q]!) / (2 * Math.max(mu, 1e-9));
      const back = reflectance(invariant);
      harmonicsAt(harmonics, mu, values);
      for (let row = 0; row < modeCount; row++) {
        const weight = step * values[oddPositions[row]!]!;
        for (const i of testedPositions[row]!) {
          const leaving = downward ? 1 : reflectionSigns[i]!;
          const arriving = downward ? reflectionSigns[i]! : 1;
          own[row * count + i]! += weight * values[i]! * (leaving - back * arriving);
        }
      }
    }
  }
  return own;
}
