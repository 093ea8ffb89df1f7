import { parse } from 'csv-parse/sync';

/** A damaged or missing data file. The message names the file and the line. */
export class DataError extends Error {
  constructor(file: string, line: number | null, detail: string) {
    super(`reference data: ${file}${line === null ? '' : ` line ${line}`}: ${detail}`);
    this.name = 'DataError';
  }
}

export interface DataRow {
  readonly line: number;
  readonly cells: Readonly<Record<string, string>>;
}

/** A data file: its header of `# key: value` lines, and its rows by column name. */
export interface ParsedDataFile {
  readonly file: string;
  readonly header: Readonly<Record<string, string>>;
  readonly rows: readonly DataRow[];
}

const headerLine = /^# ([a-z_]+): ?(.*)$/;

export function parseDataFile(file: string, text: string, columns: readonly string[]): ParsedDataFile {
  const lines = text.split('\n');
  const header: Record<string, string> = {};
  let first = 0;
  while (lines[first]?.startsWith('#')) {
    const match = headerLine.exec(lines[first]!);
    if (!match) throw new DataError(file, first + 1, 'a header line must read "# key: value"');
    header[match[1]!] = match[2]!;
    first++;
  }
  let records: string[][];
  try {
    records = parse(lines.slice(first).join('\n'), { relax_column_count: true }) as string[][];
  } catch (error) {
    throw new DataError(file, first + 1, (error as Error).message);
  }
  const names = records[0] ?? [];
  if (names.join() !== columns.join())
    throw new DataError(file, first + 1, `columns must be ${columns.join(',')}, not ${names.join(',')}`);
  const rows = records.slice(1).map((cells, index): DataRow => {
    const line = first + 2 + index;
    if (cells.length !== columns.length) throw new DataError(file, line, `${cells.length} cells where ${columns.length} belong`);
    return { line, cells: Object.fromEntries(columns.map((column, i) => [column, cells[i]!])) };
  });
  if (rows.length === 0) throw new DataError(file, null, 'no rows');
  return { file, header, rows };
}

const decimal = /^-?\d+(\.\d+)?(e-?\d+)?$/;

export function numberIn(parsed: ParsedDataFile, row: DataRow, column: string, min: number, max: number): number {
  const text = row.cells[column] ?? '';
  const value = decimal.test(text) ? Number(text) : Number.NaN;
  if (!(value >= min && value <= max)) {
    throw new DataError(parsed.file, row.line, `${column} is '${text}'; it must be a number from ${min} to ${max}`);
  }
  return value;
}

export function textIn(parsed: ParsedDataFile, row: DataRow, column: string): string {
  const text = row.cells[column] ?? '';
  if (text === '') throw new DataError(parsed.file, row.line, `${column} is empty`);
  return text;
}

const statuses = ['read', 'read-secondary', 'derived', 'from-memory'] as const;

export function statusIn(file: string, line: number | null, text: string | undefined): (typeof statuses)[number] {
  const status = statuses.find((known) => known === text);
  if (!status) throw new DataError(file, line, `status is '${text ?? ''}'; it must be one of ${statuses.join(', ')}`);
  return status;
}
