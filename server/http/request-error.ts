import type { ProblemCode } from './problem-kinds.js';

/** One fault: a JSON Pointer into the body, or `?name` for a query parameter, and what is expected there. */
export interface Fault {
  readonly pointer: string;
  readonly detail: string;
}

/** A refusal by the service. Its detail is public; nothing inner goes into it. */
export class RequestError extends Error {
  constructor(
    readonly code: ProblemCode,
    detail: string,
    readonly errors: readonly Fault[] = [],
    readonly headers: Readonly<Record<string, string>> = {},
  ) {
    super(detail);
    this.name = 'RequestError';
  }
}
