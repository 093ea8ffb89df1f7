/** One forward step of the database. Never edited after release. */
export interface Migration {
  readonly id: number;
  readonly name: string;
  readonly sql: string;
}
