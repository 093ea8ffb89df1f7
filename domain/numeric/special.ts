/** Bessel function of the first kind of order 0, to about 1e-15 absolute.
 *  Power series up to |x| = 8, backward recurrence to 25, Hankel's asymptotic series beyond.
 *  @source AbramowitzStegun1964 9.1.10, 9.1.46 (normalization), 9.2.5 */
export function besselJ0(x: number): number {
  return bessel(0, Math.abs(x));
}

/** Bessel function of the first kind of order 1, to about 1e-15 absolute. Same method as `besselJ0`.
 *  @source AbramowitzStegun1964 9.1.10, 9.1.46, 9.2.5 */
export function besselJ1(x: number): number {
  return x < 0 ? -bessel(1, -x) : bessel(1, x);
}

function bessel(order: 0 | 1, x: number): number {
  if (x < 4) return besselSeries(order, x);
  if (x < 25) return besselRecurrence(order, x);
  return besselAsymptotic(order, x);
}

function besselSeries(order: 0 | 1, x: number): number {
  const quarter = -(x * x) / 4;
  let term = order === 0 ? 1 : x / 2;
  let sum = term;
  for (let k = 1; k < 40; k++) {
    term *= quarter / (k * (k + order));
    sum += term;
    if (Math.abs(term) < 1e-17) break;
  }
  return sum;
}

function besselRecurrence(order: 0 | 1, x: number): number {
  const start = 2 * Math.ceil((x + 30) / 2);
  let above = 0;
  let value = 1e-30;
  let normal = 0;
  let first = 0;
  for (let n = start; n > 0; n--) {
    if (n % 2 === 0) normal += 2 * value;
    if (n === 1) first = value;
    const below = (2 * n * value) / x - above;
    above = value;
    value = below;
  }
  return (order === 0 ? value : first) / (normal + value);
}

function besselAsymptotic(order: 0 | 1, x: number): number {
  const mu = 4 * order * order;
  let term = 1;
  let even = 1;
  let odd = 0;
  for (let k = 1; k < 30; k++) {
    const next = (term * (mu - (2 * k - 1) ** 2)) / (k * 8 * x);
    if (Math.abs(next) >= Math.abs(term) || Math.abs(next) < 1e-17) break;
    term = next;
    if (k % 2 === 1) odd += k % 4 === 1 ? term : -term;
    else even += k % 4 === 0 ? term : -term;
  }
  const phase = x - (order / 2 + 0.25) * Math.PI;
  return Math.sqrt(2 / (Math.PI * x)) * (even * Math.cos(phase) - odd * Math.sin(phase));
}
