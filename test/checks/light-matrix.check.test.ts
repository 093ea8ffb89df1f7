import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { type MatrixInputs, solvers } from './solvers/light-matrix.js';

interface MatrixRow {
  readonly id: string;
  readonly quantity: string;
  readonly inputs: string;
  readonly expected: string;
  readonly tolerance_relative: string;
  readonly tolerance_absolute: string;
}

const text = readFileSync(new URL('./truth/light-matrix.csv', import.meta.url), 'utf8');
const cases = (parse(text, { columns: true }) as MatrixRow[]).map((row) => {
  const inputs = JSON.parse(row.inputs) as MatrixInputs;
  const expected = Number(row.expected);
  const target = Number(row.tolerance_relative);
  const solve = solvers[row.quantity];
  const found = solve ? solve(inputs) : Number.NaN;
  const tolerance = target * expected + Number(row.tolerance_absolute);
  return { id: row.id, quantity: row.quantity, inputs, expected, found, deviation: found / expected - 1, target, tolerance };
});

function missesOf(quantity: string): string[] {
  return cases
    .filter((row) => row.quantity === quantity && !(Math.abs(row.found - row.expected) <= row.tolerance))
    .sort((a, b) => Math.abs(b.deviation) - Math.abs(a.deviation))
    .map(
      ({ id, expected, found, deviation }) =>
        `${id}: ${found.toPrecision(4)} against ${expected} (${(100 * deviation).toFixed(2)} %)`,
    );
}

describe('fast light solver against Monte Carlo, from 308 to 10 600 nm and phototypes I to VI', () => {
  it('covers at least 40 stacks and spots, each truth known to 0.5 %, or a fifth of its target where that is more', () => {
    const pairs = new Set(cases.map(({ id }) => id.slice(0, id.lastIndexOf('-'))));
    expect(pairs.size).toBeGreaterThanOrEqual(40);
    expect(new Set(cases.map(({ inputs }) => JSON.stringify(inputs.layers))).size).toBeGreaterThanOrEqual(20);
    for (const { id, inputs, expected, target } of cases.filter(({ quantity }) => quantity.startsWith('fluence'))) {
      expect(inputs.standardError / expected, id).toBeLessThan(Math.max(0.005, target / 5));
    }
  });

  it.each(['diffuse reflectance', 'absorbed fraction'])(
    '%s at the fine setting within 0.5 % and two standard errors of the truth',
    (quantity) => {
      expect(cases.filter((row) => row.quantity === quantity).length).toBeGreaterThan(20);
      expect(missesOf(quantity)).toEqual([]);
    },
  );

  it.each([
    ['fluence ratio on the axis, target 1 %', 'broad beams and spots from 6 mm'],
    ['fluence ratio on the axis, target 3 %', 'spots from 3 mm'],
    ['fluence ratio on the axis, target 5 %', 'spots from 1 mm'],
  ])('%s (%s), with two standard errors of the truth', (quantity) => {
    expect(cases.filter((row) => row.quantity === quantity).length).toBeGreaterThan(100);
    expect(missesOf(quantity)).toEqual([]);
  });
});
