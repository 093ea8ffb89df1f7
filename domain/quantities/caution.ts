/** A non-fatal remark that travels with a result. `code` is stable and machine-readable. */
export interface Caution {
  readonly code: string;
  readonly text: string;
}

/** How far a figure can be trusted: read in its source, read where another quotes it, computed from others, or recalled. */
export type DataStatus = 'read' | 'read-secondary' | 'derived' | 'from-memory';

/** A default that was filled in because the request did not say. */
export interface Assumption {
  readonly name: string;
  readonly value: number | string | boolean;
  readonly unit?: string;
  readonly source: string;
  readonly status: DataStatus | 'convention';
}

/** Collects cautions and assumptions while a calculation runs; each code or name is kept once. */
export class Remarks {
  readonly #cautions = new Map<string, Caution>();
  readonly #assumptions = new Map<string, Assumption>();

  caution(code: string, text: string): void {
    if (!this.#cautions.has(code)) this.#cautions.set(code, { code, text });
  }

  assume(assumption: Assumption): void {
    if (!this.#assumptions.has(assumption.name)) this.#assumptions.set(assumption.name, assumption);
  }

  get cautions(): Caution[] {
    return [...this.#cautions.values()];
  }

  get assumptions(): Assumption[] {
    return [...this.#assumptions.values()];
  }
}
