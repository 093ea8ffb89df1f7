import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { solvers } from './solvers/transport.js';

interface Row {
  readonly id: string;
  readonly quantity: string;
  readonly inputs: string;
  readonly expected: string;
  readonly tolerance_relative: string;
  readonly tolerance_absolute: string;
  readonly source: string;
}

const rows = parse(readFileSync(new URL('./truth/transport.csv', import.meta.url), 'utf8'), { columns: true }) as Row[];

describe('outside checks of light transport, fine setting', () => {
  it('has all its points', () => {
    expect(rows).toHaveLength(82);
  });

  it.each(rows.map((row) => [row.id, row.quantity, row.source, row] as const))('%s %s [%s]', (_, quantity, __, row) => {
    const expected = Number(row.expected);
    const tolerance = Number(row.tolerance_relative) * Math.abs(expected) + Number(row.tolerance_absolute);
    expect(Math.abs(solvers[quantity]!(JSON.parse(row.inputs)) - expected)).toBeLessThanOrEqual(tolerance);
  });
});
