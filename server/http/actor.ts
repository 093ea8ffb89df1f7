import { createHash } from 'node:crypto';
import type { FastifyInstance, FastifyRequest } from 'fastify';
import { RequestError } from './request-error.js';

export const roles = ['reader', 'operator', 'physicist', 'administrator'] as const;
export type Role = (typeof roles)[number];

/** Who asks. `clinicId` is null for keys of the installation itself. */
export interface Actor {
  readonly keyId: string;
  readonly clinicId: string | null;
  readonly role: Role;
}

declare module 'fastify' {
  interface FastifyContextConfig {
    /** Least role that may call the route; a route without one is open. */
    role?: Role;
    /** Media types the route can give; JSON when absent. */
    produces?: readonly string[];
    /** The route takes an Idempotency-Key. */
    idempotent?: boolean;
  }
  interface FastifyRequest {
    actor: Actor | null;
  }
}

export function secretHash(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}

export function hasRole(actor: Actor, least: Role): boolean {
  return roles.indexOf(actor.role) >= roles.indexOf(least);
}

/** The caller of a route that has a role. */
export function actorOf(request: FastifyRequest): Actor {
  if (!request.actor) throw new RequestError('unauthenticated', 'This path needs a key.');
  return request.actor;
}

/** The caller's clinic. Throws: forbidden for a key of the installation. */
export function clinicOf(request: FastifyRequest): string {
  const { clinicId } = actorOf(request);
  if (clinicId === null)
    throw new RequestError('forbidden', 'This path needs a key that belongs to a clinic; make one with /v1/keys.');
  return clinicId;
}

const bearer = /^Bearer ([\x21-\x7e]{16,256})$/i;

/** Identifies the caller by key and refuses roles that are too low. */
export function installAuthentication(app: FastifyInstance, findActor: (secretSha256: string) => Actor | null): void {
  app.decorateRequest('actor', null);
  app.addHook('onRequest', (request, _reply, done) => {
    const least = request.routeOptions.config.role;
    if (least === undefined) {
      done();
      return;
    }
    const secret = bearer.exec(request.headers.authorization ?? '')?.[1];
    const actor = secret === undefined ? null : findActor(secretHash(secret));
    if (!actor) {
      const headers = { 'www-authenticate': 'Bearer' };
      done(new RequestError('unauthenticated', 'Send Authorization: Bearer <key> with a valid key.', [], headers));
      return;
    }
    if (!hasRole(actor, least)) {
      done(new RequestError('forbidden', `This needs the role ${least} or higher; the key has ${actor.role}.`));
      return;
    }
    request.actor = actor;
    done();
  });
}
