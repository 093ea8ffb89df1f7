/** Every kind of problem a reply can report. `type` is /problems/<code>, a page with this text. */
export const problemKinds = {
  malformed: {
    status: 400,
    title: 'Malformed request',
    help: 'The request cannot be read: broken JSON, or a query parameter that is unknown or faulty. Correct what `errors` names and send it again.',
  },
  unauthenticated: {
    status: 401,
    title: 'No valid key',
    help: 'Send `Authorization: Bearer <key>` with a key that has not been revoked.',
  },
  forbidden: {
    status: 403,
    title: 'Role too low',
    help: 'The key is valid but its role does not allow this. Ask an administrator for a key with the role that `detail` names.',
  },
  'not-found': { status: 404, title: 'Not found', help: 'There is no such path, or no such record in the clinic of this key.' },
  'method-not-allowed': {
    status: 405,
    title: 'Method not allowed',
    help: 'The path exists but not with this method; the `Allow` header lists those it has.',
  },
  'not-acceptable': {
    status: 406,
    title: 'No acceptable media type',
    help: 'The reply cannot be given in a type that the `Accept` header allows.',
  },
  conflict: {
    status: 409,
    title: 'Conflict',
    help: 'The record is in a state that does not allow this, or holds other content under the same identity.',
  },
  stale: {
    status: 412,
    title: 'Record has changed',
    help: 'The `If-Match` header names an older version. Read the record again and repeat the change on it.',
  },
  'too-large': { status: 413, title: 'Body too large', help: 'Send less in one request.' },
  'unsupported-media-type': {
    status: 415,
    title: 'Unsupported media type',
    help: 'Send the body in a media type that the route takes, usually application/json.',
  },
  'invalid-request': {
    status: 422,
    title: 'Invalid request',
    help: 'The request can be read but asks for something impossible. Every fault is listed in `errors` with a JSON Pointer, the unit and the range.',
  },
  'out-of-range': {
    status: 422,
    title: 'Outside the range of validity',
    help: 'A value lies outside what a table or model supports; nothing is extrapolated silently.',
  },
  'no-solution': { status: 422, title: 'No solution', help: 'The equations have no solution for this request.' },
  'not-converged': {
    status: 422,
    title: 'Calculation did not converge',
    help: 'An iteration gave up; change the request or report it with the request id.',
  },
  contradiction: { status: 422, title: 'Contradictory fields', help: 'Fields of the request cannot be true together.' },
  'unknown-reference': { status: 422, title: 'Unknown reference', help: 'The request names something that does not exist.' },
  'precondition-required': {
    status: 428,
    title: 'If-Match required',
    help: 'Changes need the `If-Match` header with the ETag of the version they were made on.',
  },
  'too-many-requests': { status: 429, title: 'Too many requests', help: 'Wait for the seconds that `Retry-After` names.' },
  'internal-error': {
    status: 500,
    title: 'Internal error',
    help: 'Something failed inside. Report it with the request id; the log has the rest.',
  },
  busy: { status: 503, title: 'Busy or a dependency failed', help: 'Try again after the seconds that `Retry-After` names.' },
  'disk-full': {
    status: 507,
    title: 'Disk full',
    help: 'Nothing was stored. Free space, then send the request again; what was acknowledged before is safe.',
  },
} as const;

export type ProblemCode = keyof typeof problemKinds;
