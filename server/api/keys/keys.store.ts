import type { Db } from '../../db/database.js';
import type { Actor, Role } from '../../http/actor.js';

export interface KeyRecord {
  readonly id: string;
  readonly clinicId: string | null;
  readonly label: string;
  readonly role: Role;
  readonly createdAt: string;
  readonly revokedAt: string | null;
}

const columns = 'id, clinic_id AS clinicId, label, role, created_at AS createdAt, revoked_at AS revokedAt';

/** Keys by their hash. Secrets are never stored. A key of a clinic sees only the keys of that clinic. */
export function openKeyStore(db: Db) {
  const byHash = db.prepare(
    'SELECT id AS keyId, clinic_id AS clinicId, role FROM api_keys WHERE secret_sha256 = ? AND revoked_at IS NULL',
  );
  const insert = db.prepare(
    'INSERT INTO api_keys (id, clinic_id, label, role, secret_sha256, created_at) VALUES (@id, @clinicId, @label, @role, @secretSha256, @createdAt)',
  );
  const scoped = '(@clinicId IS NULL OR clinic_id = @clinicId)';
  const one = db.prepare(`SELECT ${columns} FROM api_keys WHERE id = @id AND ${scoped}`);
  const page = db.prepare(`SELECT ${columns} FROM api_keys WHERE ${scoped} AND id > @after ORDER BY id LIMIT @count`);
  const revoke = db.prepare(`UPDATE api_keys SET revoked_at = @at WHERE id = @id AND ${scoped} AND revoked_at IS NULL`);
  const anyKey = db.prepare('SELECT 1 FROM api_keys LIMIT 1');
  const clinic = db.prepare('SELECT 1 FROM clinics WHERE id = ?');
  const others = db.prepare(
    "SELECT count(*) AS left FROM api_keys WHERE role = 'administrator' AND revoked_at IS NULL AND id <> @id AND clinic_id IS (SELECT clinic_id FROM api_keys WHERE id = @id)",
  );
  const cache = new Map<string, Actor | null>();
  return {
    findActor(secretSha256: string): Actor | null {
      const known = cache.get(secretSha256);
      if (known !== undefined) return known;
      const actor = (byHash.get(secretSha256) as Actor | undefined) ?? null;
      if (actor) cache.set(secretSha256, actor);
      return actor;
    },
    isEmpty: (): boolean => anyKey.get() === undefined,
    insert: (key: KeyRecord & { readonly secretSha256: string }): void => void insert.run(key),
    find: (id: string, clinicId: string | null) => (one.get({ id, clinicId }) as KeyRecord | undefined) ?? null,
    list: (clinicId: string | null, after: string, count: number) => page.all({ clinicId, after, count }) as KeyRecord[],
    revoke(id: string, clinicId: string | null, at: string): boolean {
      cache.clear();
      return revoke.run({ id, clinicId, at }).changes === 1;
    },
    administratorsBeside: (id: string): number => (others.get({ id }) as { left: number }).left,
    clinicExists: (id: string): boolean => clinic.get(id) !== undefined,
  };
}

export type KeyStore = ReturnType<typeof openKeyStore>;
