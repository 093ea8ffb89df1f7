/** Complementary error function to about 1e-15: its series below 2, a continued fraction above. */
export function erfc(x: number): number {
  if (x < 0) return 2 - erfc(-x);
  if (x < 2) {
    let term = x;
    let sum = x;
    for (let n = 1; Math.abs(term) > 1e-18; n++) {
      term *= -(x * x) / n;
      sum += term / (2 * n + 1);
    }
    return 1 - (2 / Math.sqrt(Math.PI)) * sum;
  }
  return Math.exp(-x * x) * scaledTail(x);
}

// exp(x^2) erfc(x) for x >= 2 by Lentz's continued fraction evaluated from its far end.
function scaledTail(x: number): number {
  let tail = x;
  for (let n = 120; n >= 1; n--) tail = x + n / 2 / tail;
  return 1 / (tail * Math.sqrt(Math.PI));
}

/** exp(x^2) erfc(x). */
export function scaledErfc(x: number): number {
  return x < 2 ? Math.exp(x * x) * erfc(x) : scaledTail(x);
}

export const erf = (x: number): number => 1 - erfc(x);

/** Carslaw and Jaeger 1959, sec. 10.3: heat 1 J/m2, J/m or J released at once in a plane, line or point. SI units. */
export function instantaneousSource(
  dimensions: 1 | 2 | 3,
  distanceM: number,
  timeS: number,
  alpha: number,
  rhoC: number,
): number {
  return Math.exp(-(distanceM ** 2) / (4 * alpha * timeS)) / (rhoC * (4 * Math.PI * alpha * timeS) ** (dimensions / 2));
}

/** Carslaw and Jaeger 1959, sec. 10.3: center of a sphere at first 1 warmer than its surroundings. */
export function sphereCenterDecay(radiusM: number, timeS: number, alpha: number): number {
  const x = radiusM / (2 * Math.sqrt(alpha * timeS));
  return erf(x) - (2 / Math.sqrt(Math.PI)) * x * Math.exp(-x * x);
}

/** Center of a cylinder at first 1 warmer than its surroundings. */
export const cylinderCenterDecay = (radiusM: number, timeS: number, alpha: number): number =>
  -Math.expm1(-(radiusM ** 2) / (4 * alpha * timeS));

/** Middle of a plane at first 1 warmer than its surroundings. */
export const slabCenterDecay = (halfThicknessM: number, timeS: number, alpha: number): number =>
  erf(halfThicknessM / (2 * Math.sqrt(alpha * timeS)));

/** Carslaw and Jaeger 1959, sec. 2.7: half-space that exchanges heat with a medium 1 warmer through h; letters eta = h / k. */
export function convectiveHalfSpace(depthM: number, timeS: number, alpha: number, eta: number): number {
  const x = depthM / (2 * Math.sqrt(alpha * timeS));
  const y = eta * Math.sqrt(alpha * timeS);
  return erfc(x) - Math.exp(-x * x) * scaledErfc(x + y);
}

/** Insulated surface after heat exp(-mu z) per volume at once, over its first rise. */
export const exponentialShortPulse = (mu: number, timeS: number, alpha: number): number =>
  scaledErfc(mu * Math.sqrt(alpha * timeS));

/** Carslaw and Jaeger 1959, sec. 2.11: insulated surface under constant irradiance absorbed as exp(-mu z). */
export function exponentialLongPulse(irradiance: number, mu: number, timeS: number, alpha: number, k: number): number {
  const x = mu * Math.sqrt(alpha * timeS);
  return (irradiance / (k * mu)) * ((2 * x) / Math.sqrt(Math.PI) + scaledErfc(x) - 1);
}
