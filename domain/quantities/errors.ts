/** The kinds of refusal that the physics knows.
 *  out-of-range: a value lies outside where the model or table holds.
 *  no-solution: the equations have none. not-converged: an iteration gave up.
 *  contradiction: fields that cannot be true together. unknown-reference: an id that no table has. */
export type DomainErrorCode = 'out-of-range' | 'no-solution' | 'not-converged' | 'contradiction' | 'unknown-reference';

export type DomainFacts = Readonly<Record<string, string | number | boolean | null | readonly string[]>>;

/** A refusal by the physics, with its facts as fields. It knows no HTTP status.
 *  `field` names the request field at fault, where one is known (camelCase path such as `skin.itaDegrees`). */
export class DomainError extends Error {
  constructor(
    readonly code: DomainErrorCode,
    message: string,
    readonly facts: DomainFacts = {},
  ) {
    super(message);
    this.name = 'DomainError';
  }
}

/** Refuses a value outside [min, max], or one that is not finite.
 *  Throws: out-of-range (quantity, value, min, max). */
export function assertWithin(quantity: string, value: number, min: number, max: number): void {
  if (Number.isFinite(value) && value >= min && value <= max) return;
  throw new DomainError('out-of-range', `${quantity} is ${value}; it must lie between ${min} and ${max}`, {
    quantity,
    value: Number.isFinite(value) ? value : String(value),
    min,
    max,
  });
}
