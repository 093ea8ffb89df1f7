import { DomainError } from '../quantities/errors.js';

/** Value of a table between its points: logarithm against argument where both neighbors are positive, else linear.
 *  Shape: `xs` ascending, `ys` of the same length. Throws: out-of-range outside [first, last]. */
export function interpolateLog(xs: ArrayLike<number>, ys: ArrayLike<number>, x: number, quantity: string): number {
  const last = xs.length - 1;
  if (!(x >= xs[0]! && x <= xs[last]!)) {
    throw new DomainError('out-of-range', `${quantity} is ${x}; the table reaches from ${xs[0]} to ${xs[last]}`, {
      quantity,
      value: Number.isFinite(x) ? x : String(x),
      min: xs[0]!,
      max: xs[last]!,
    });
  }
  let low = 0;
  let high = last;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (xs[middle]! <= x) low = middle;
    else high = middle;
  }
  const share = last === 0 ? 0 : (x - xs[low]!) / (xs[high]! - xs[low]!);
  const below = ys[low]!;
  const above = ys[high]!;
  if (share === 0) return below;
  return below > 0 && above > 0 ? below * Math.exp(share * Math.log(above / below)) : below + share * (above - below);
}
