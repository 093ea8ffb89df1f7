import type Database from 'better-sqlite3';
import type { Db } from './database.js';

type Statement = Database.Statement<unknown[]>;

const caches = new WeakMap<Db, Map<string, Statement>>();

/** The statement of a text, prepared once per database. */
export function prepared(db: Db, sql: string): Statement {
  let cache = caches.get(db);
  if (!cache) {
    cache = new Map();
    caches.set(db, cache);
  }
  let statement = cache.get(sql);
  if (!statement) {
    statement = db.prepare(sql);
    cache.set(sql, statement);
  }
  return statement;
}
