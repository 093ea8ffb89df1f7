import { z } from 'zod';

const plain = (value: number) =>
  Math.abs(value) >= 1e6 || (value !== 0 && Math.abs(value) < 1e-3) ? value.toExponential().replace('e+', 'e') : String(value);

/** A number with its unit and range, told in every refusal. Strings are never taken for numbers. */
export function quantity(unit: string, min: number, max: number, description: string) {
  const expected = `must be a number${unit === '' ? '' : ` of ${unit}`} from ${plain(min)} to ${plain(max)}`;
  return z
    .number({ error: expected })
    .min(min, { error: expected })
    .max(max, { error: expected })
    .describe(description)
    .meta({ 'x-unit': unit });
}

/** A whole number with its range. */
export function count(min: number, max: number, description: string) {
  const expected = `must be a whole number from ${min} to ${max}`;
  return z.int({ error: expected }).min(min, { error: expected }).max(max, { error: expected }).describe(description);
}

const decimal = /^-?\d+(\.\d+)?([eE][-+]?\d+)?$/;

/** The same as `quantity` for a query parameter: a decimal numeral, nothing else. */
export function queryQuantity(unit: string, min: number, max: number, description: string) {
  const expected = `must be a number${unit === '' ? '' : ` of ${unit}`} from ${plain(min)} to ${plain(max)}`;
  return z
    .string({ error: expected })
    .regex(decimal, { error: expected })
    .transform(Number)
    .refine((value) => value >= min && value <= max, { error: expected })
    .describe(`${description}${unit === '' ? '' : `, in ${unit}`}`);
}

/** A whole number as a query parameter. */
export function queryCount(min: number, max: number, description: string) {
  const expected = `must be a whole number from ${min} to ${max}`;
  return z
    .string({ error: expected })
    .regex(/^\d{1,9}$/, { error: expected })
    .transform(Number)
    .refine((value) => value >= min && value <= max, { error: expected })
    .describe(description);
}

/** A time of day, RFC 3339 with an offset. */
export const instant = z.iso.datetime({
  offset: true,
  error: 'must be a time such as 2026-03-01T09:30:00+01:00 (RFC 3339 with an offset)',
});

/** Words by people: one line or a few, without control characters. */
export function text(maxLength: number, description: string) {
  const error = `must be 1 to ${maxLength} characters of text`;
  return (
    z
      .string({ error })
      .min(1, { error })
      .max(maxLength, { error })
      // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is refused
      .regex(/^[^\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]*$/, { error: 'must not hold control characters' })
      .describe(description)
  );
}

export const id = z.string({ error: 'must be an id' }).regex(/^[\w-]{1,64}$/, { error: 'must be an id' });

/** A rule over several fields that is checked even when others are at fault, so that all faults are told at once. */
export const whenever = { when: () => true } as const;
