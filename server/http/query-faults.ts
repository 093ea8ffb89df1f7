import { DomainError } from '../../domain/quantities/errors.js';
import { RequestError } from './request-error.js';

/** Runs a calculation of a GET; what the physics refuses is then a fault of a query parameter. Throws: malformed. */
export function faultOf<T>(parameter: string, calculate: () => T): T {
  try {
    return calculate();
  } catch (error) {
    if (!(error instanceof DomainError)) throw error;
    throw new RequestError('malformed', error.message, [{ pointer: `?${parameter}`, detail: error.message }]);
  }
}
