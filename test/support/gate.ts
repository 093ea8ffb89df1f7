import { describe, expect, it } from 'vitest';
import { compare, readTruth, type Solvers } from './truth.js';

/** Gates a topic on its truth file: every row within its tolerance, every known miss still a miss, and as many rows as there should be. */
export function gateTopic(topic: string, solvers: Solvers, count: number): void {
  const rows = readTruth(topic);
  const titled = (wanted: boolean) =>
    rows
      .filter((row) => (row.knownMiss !== '') === wanted)
      .map((row) => [row.source, row.id, row.quantity, row.knownMiss, row] as const);
  describe(`outside checks of ${topic}`, () => {
    it('have all their points', () => {
      expect(rows).toHaveLength(count);
    });
    it.each(titled(false))('[%s] %s %s', (_source, _id, _quantity, _miss, row) => {
      const { found } = compare(row, solvers);
      expect(Math.abs(found - row.expected), `${found} against ${row.expected}`).toBeLessThanOrEqual(row.tolerance);
    });
    const misses = titled(true);
    if (misses.length > 0) {
      it.each(misses)('[%s] %s %s: known miss, %s', (_source, _id, _quantity, _miss, row) => {
        expect(compare(row, solvers).within).toBe(false);
      });
    }
  });
}
