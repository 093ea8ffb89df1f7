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

  /** Every caution; figures recalled from memory among the assumptions add one that names them. */
  get cautions(): Caution[] {
    const recalled = [...this.#assumptions.values()].filter(({ status }) => status === 'from-memory').map(({ name }) => name);
    if (recalled.length === 0) return [...this.#cautions.values()];
    const text = `No source could be opened for these figures; check them before any use that matters: ${recalled.join(', ')}.`;
    return [...this.#cautions.values(), { code: 'from-memory', text }];
  }

  get assumptions(): Assumption[] {
    return [...this.#assumptions.values()];
  }
}
