import { ConfigError, readConfig } from '../config.js';
import { openDatabase } from '../db/database.js';
import { DatabaseError } from '../db/database-error.js';

/** Brings the database up to date. Gives the exit code. */
export function migrateCommand(environment: Readonly<Record<string, string | undefined>>): number {
  try {
    const { databaseFile } = readConfig(environment);
    openDatabase(databaseFile, () => new Date()).close();
    process.stdout.write(`database ${databaseFile} is up to date\n`);
    return 0;
  } catch (error) {
    if (!(error instanceof ConfigError || error instanceof DatabaseError)) throw error;
    process.stderr.write(`${error.message}\n`);
    return 1;
  }
}
