/** A database that cannot be used; its message is one clear line. */
export class DatabaseError extends Error {}
