import { createHash } from 'node:crypto';
import canonicalize from 'canonicalize';

/** RFC 8785: one text for one value. Throws on NaN and infinities. */
export function canonicalJson(value: unknown): string {
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError('there is no canonical form of undefined');
  return text;
}

export function sha256Hex(text: string | Uint8Array): string {
  return createHash('sha256').update(text).digest('hex');
}
