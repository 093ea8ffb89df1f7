import { text } from './numbers.js';

const personal: readonly [RegExp, string][] = [
  [/[^\s@]+@[^\s@]+\.[a-z]{2,}/i, 'an e-mail address'],
  [
    /(?:\+|\b00)\d(?:[\s()./-]?\d){6,}|\b\d{3,5}[\s/-]\d{3,4}[\s-]\d{3,5}\b|\(\d{2,5}\)\s?\d{3,}|\b\d{3}-\d{4}\b|\b\d{9,}\b/,
    'a telephone number',
  ],
  [
    /\b(?:19|20)\d\d[-/.](?:0?[1-9]|1[0-2])[-/.](?:0?[1-9]|[12]\d|3[01])\b|\b(?:0?[1-9]|[12]\d|3[01])[-/.](?:0?[1-9]|[12]\d|3[01])[-/.](?:19|20)\d\d\b|\b(?:born|d\.?o\.?b\.?|date of birth|birthday)\b/i,
    'a date of birth',
  ],
];

/** What of a person a text seems to hold; null when nothing. */
export function personalDataIn(words: string): string | null {
  return personal.find(([pattern]) => pattern.test(words))?.[1] ?? null;
}

/** Words by people that must not tell who a person is. */
export function freeText(maxLength: number, description: string) {
  return text(maxLength, `${description}. No names, addresses, telephone numbers or dates of birth`).check((context) => {
    const found = personalDataIn(context.value);
    if (found === null) return;
    const message = `seems to hold ${found}; leave personal data out and give dates of treatment in their own fields`;
    context.issues.push({ code: 'custom', message, input: context.value });
  });
}
