import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { parse } from 'csv-parse/sync';

/** One figure from outside. `inputs` is what the topic's solver needs; a row with `knownMiss` is one the model is known not to meet. */
export interface TruthRow {
  readonly id: string;
  readonly quantity: string;
  readonly inputs: unknown;
  readonly expected: number;
  readonly unit: string;
  readonly tolerance: number;
  readonly status: string;
  readonly source: string;
  readonly knownMiss: string;
}

// Each solver knows the inputs of its own quantity.
export type Solvers = Readonly<Record<string, (inputs: never) => number>>;

/** A figure beside ours. The error is relative, or absolute where the figure is zero. */
export interface Comparison {
  readonly row: TruthRow;
  readonly found: number;
  readonly error: number;
  readonly within: boolean;
}

const checks = new URL('../checks/', import.meta.url);
const columns = 'id,quantity,inputs,expected,unit,tolerance_relative,tolerance_absolute,status,source';
const statuses = ['read', 'read-secondary', 'analytic', 'computed', 'derived', 'from-memory', 'common practice'];

/** Every topic that has a truth file. */
export function listTopics(): string[] {
  return readdirSync(new URL('truth/', checks))
    .filter((name) => name.endsWith('.csv'))
    .map((name) => name.slice(0, -4))
    .sort();
}

/** The rows of a topic. A row that cannot be compared is an error, never left out. */
export function readTruth(topic: string): TruthRow[] {
  const text = readFileSync(new URL(`truth/${topic}.csv`, checks), 'utf8');
  const head = text.slice(0, text.indexOf('\n')).trimEnd();
  if (head !== columns && head !== `${columns},known_miss`) throw new Error(`${topic}: columns must be ${columns}`);
  const seen = new Set<string>();
  return (parse(text, { columns: true }) as Record<string, string>[]).map((cells): TruthRow => {
    const { id = '', quantity = '', inputs = '', status = '', source = '' } = cells;
    const stated = `${cells.tolerance_relative}${cells.tolerance_absolute}` !== '';
    const expected = numberOf(cells.expected);
    const tolerance = numberOf(cells.tolerance_relative || '0') * Math.abs(expected) + numberOf(cells.tolerance_absolute || '0');
    const key = `${id} ${quantity}`;
    if (seen.has(key)) throw new Error(`${topic}: ${key} stands twice`);
    seen.add(key);
    if (!Number.isFinite(expected) || !stated || !(tolerance >= 0))
      throw new Error(`${topic}: ${key} lacks a number or a tolerance`);
    if (source === '' || !statuses.includes(status))
      throw new Error(`${topic}: ${key} lacks a source, or its status '${status}'`);
    const { unit = '', known_miss: knownMiss = '' } = cells;
    return { id, quantity, inputs: JSON.parse(inputs), expected, unit, tolerance, status, source, knownMiss };
  });
}

function numberOf(text: string | undefined): number {
  return text === undefined || text.trim() === '' ? Number.NaN : Number(text);
}

/** The solvers that belong to a topic. */
export async function solversOf(topic: string): Promise<Solvers> {
  const file = fileURLToPath(new URL(`solvers/${topic}.ts`, checks));
  return ((await import(pathToFileURL(file).href)) as { solvers: Solvers }).solvers;
}

export function compare(row: TruthRow, solvers: Solvers): Comparison {
  const solve = solvers[row.quantity] as ((inputs: unknown) => number) | undefined;
  if (!solve) throw new Error(`no solver for '${row.quantity}'`);
  const found = solve(row.inputs);
  const deviation = Math.abs(found - row.expected);
  return {
    row,
    found,
    error: row.expected === 0 ? deviation : deviation / Math.abs(row.expected),
    within: deviation <= row.tolerance,
  };
}
