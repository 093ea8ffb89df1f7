/** A decimal number as printed: digits x 10^-scale, without rounding. */
interface Decimal {
  readonly digits: bigint;
  readonly scale: number;
}

function decimalOf(value: number): Decimal {
  const [mantissa = '0', exponent = '0'] = String(value).toLowerCase().split('e');
  const [whole = '0', fraction = ''] = mantissa.split('.');
  const scale = fraction.length - Number(exponent);
  const digits = BigInt(whole + fraction);
  return scale >= 0 ? { digits, scale } : { digits: digits * 10n ** BigInt(-scale), scale: 0 };
}

const absolute = (value: bigint): bigint => (value < 0n ? -value : value);

/** How |value - nominal| compares with fraction x |nominal|, in decimal arithmetic as a person would on paper: negative inside, 0 at the
 *  very edge, positive outside. In binary 12.0 against 10 at 0.2 can fall on either side. Shape: scalar. Valid: finite numbers. */
export function compareWithFraction(value: number, nominal: number, fraction: number): number {
  const [v, n, f] = [decimalOf(value), decimalOf(nominal), decimalOf(fraction)];
  const scale = Math.max(v.scale, n.scale);
  const difference = absolute(v.digits * 10n ** BigInt(scale - v.scale) - n.digits * 10n ** BigInt(scale - n.scale));
  const allowed = absolute(n.digits) * f.digits; // at scale n.scale + f.scale
  const common = Math.max(scale, n.scale + f.scale);
  const left = difference * 10n ** BigInt(common - scale);
  const right = allowed * 10n ** BigInt(common - n.scale - f.scale);
  return left < right ? -1 : left > right ? 1 : 0;
}

/** Whether value lies within nominal +/- fraction, edges included. @source IEC60601 (20 % output tolerance, edge accepted) */
export function isWithinFraction(value: number, nominal: number, fraction: number): boolean {
  return compareWithFraction(value, nominal, fraction) <= 0;
}
