import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { solvers as conduction } from './solvers/conduction.js';
import { solvers as damage } from './solvers/damage.js';
import { solvers as thresholds } from './solvers/damage-thresholds.js';
import { solvers as relaxation } from './solvers/relaxation.js';

interface Row {
  readonly id: string;
  readonly quantity: string;
  readonly inputs: string;
  readonly expected: string;
  readonly tolerance_relative: string;
  readonly tolerance_absolute: string;
  readonly source: string;
}

const topics = { relaxation, conduction, damage, 'damage-thresholds': thresholds };
const counts = { relaxation: 36, conduction: 16, damage: 29, 'damage-thresholds': 10 };

describe.each(Object.entries(topics))('outside checks of %s', (topic, solvers) => {
  const text = readFileSync(new URL(`./truth/${topic}.csv`, import.meta.url), 'utf8');
  const rows = parse(text, { columns: true }) as Row[];

  it('has all its points', () => {
    expect(rows).toHaveLength(counts[topic as keyof typeof counts]);
  });

  it.each(rows.map((row) => [row.id, row.source, row] as const))('%s [%s]', (_, __, row) => {
    const expected = Number(row.expected);
    const tolerance = Number(row.tolerance_relative) * Math.abs(expected) + Number(row.tolerance_absolute);
    expect(Math.abs(solvers[row.quantity]!(JSON.parse(row.inputs)) - expected)).toBeLessThanOrEqual(tolerance);
  });
});
