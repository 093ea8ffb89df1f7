import type { Db } from './database.js';

/** Reading for one clinic, or for the installation (null). Stores see no rows but those of `clinicId`. */
export interface Reader {
  readonly db: Db;
  readonly clinicId: string | null;
}
