import { mkdirSync } from 'node:fs';
import { dirname } from 'node:path';
import Database from 'better-sqlite3';
import { DatabaseError } from './database-error.js';
import { migrate } from './migrate.js';

export type Db = Database.Database;

/** Opens the ledger, brings it up to date and checks that it can be written. `:memory:` is for tests. */
export function openDatabase(file: string, now: () => Date): Db {
  let db: Db | undefined;
  try {
    if (file !== ':memory:') mkdirSync(dirname(file), { recursive: true });
    db = new Database(file, { timeout: 5000 });
    db.pragma('journal_mode = WAL');
    db.pragma('synchronous = FULL');
    db.pragma('foreign_keys = ON');
    db.pragma('cache_size = -65536'); // 64 MiB: the exposure indexes of a large clinic
    db.pragma('trusted_schema = OFF');
    migrate(db, now);
    return db;
  } catch (error) {
    db?.close();
    if (error instanceof DatabaseError) throw error;
    const code = (error as { code?: string }).code ?? '';
    if (code === 'SQLITE_BUSY' || code === 'SQLITE_LOCKED')
      throw new DatabaseError(`database ${file} is locked by another process`);
    if (code === 'SQLITE_NOTADB' || code === 'SQLITE_CORRUPT')
      throw new DatabaseError(`database ${file} is damaged or not a ledger`);
    throw new DatabaseError(`database ${file} cannot be opened: ${(error as Error).message}`);
  }
}
