import type { FastifySchemaCompiler } from 'fastify';
import type { z } from 'zod';
import { type Fault, RequestError } from './request-error.js';

type Issue = z.core.$ZodIssue;

/** Validates a part of the request by its schema and reports every fault at once. */
export const validatorCompiler: FastifySchemaCompiler<z.ZodType> = ({ schema, httpPart }) => {
  const inQuery = httpPart === 'querystring';
  return (data: unknown) => {
    const parsed = schema.safeParse(data);
    if (parsed.success) return { value: parsed.data };
    if (httpPart === 'params') return { error: new RequestError('not-found', 'There is no record with this id.') };
    const faults = faultsOf(parsed.error.issues, inQuery);
    const where = inQuery ? 'query parameters' : 'fields of the body';
    const detail = `${faults.length === 1 ? 'One fault' : `${faults.length} faults`} in the ${where}; see errors.`;
    return { error: new RequestError(inQuery ? 'malformed' : 'invalid-request', detail, faults) };
  };
};

/** Faults of a refused value, each with its pointer. */
export function faultsOf(issues: readonly Issue[], inQuery = false, prefix: readonly PropertyKey[] = []): Fault[] {
  return issues.flatMap((issue): Fault[] => {
    const path = [...prefix, ...issue.path];
    if (issue.code === 'unrecognized_keys') {
      return issue.keys.map((key) => ({ pointer: pointerOf([...path, key], inQuery), detail: 'unknown field; remove it' }));
    }
    if (issue.code === 'invalid_union' && issue.errors.length > 0) {
      const nearest = [...issue.errors].sort((a, b) => distance(a) - distance(b))[0]!;
      return faultsOf(nearest, inQuery, path);
    }
    return [{ pointer: pointerOf(path, inQuery), detail: detailOf(issue) }];
  });
}

// The member of a union that comes nearest: a wrong type at its root is far, one wrong field is near.
function distance(issues: readonly Issue[]): number {
  return issues.reduce((sum, issue) => sum + (issue.path.length === 0 && issue.code === 'invalid_type' ? 100 : 1), 0);
}

function detailOf(issue: Issue): string {
  if (issue.code === 'invalid_union') {
    const options = (issue as { options?: readonly unknown[] }).options;
    return options ? `must be one of ${options.map(String).join(', ')}` : 'matches none of the allowed forms';
  }
  if (issue.code === 'invalid_value')
    return `must be ${issue.values.length === 1 ? '' : 'one of '}${issue.values.map(String).join(', ')}`;
  return issue.message;
}

function pointerOf(path: readonly PropertyKey[], inQuery: boolean): string {
  if (inQuery) return `?${String(path[0] ?? '')}`;
  return path.map((part) => `/${String(part).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');
}
