import { describe, expect, it } from 'vitest';
import { makeLightFields } from '../../../domain/transport/light-field.js';
import { layer } from '../../support/stacks.js';

describe('kept light fields', () => {
  const ranking = { accuracy: 'ranking' } as const;

  it('answer the same optics with the same field whatever the layers are called', () => {
    const fields = makeLightFields(4);
    const first = fields.solve([layer(100, 1, 10, 0.5, 1.4)], ranking);
    expect(fields.solve([{ ...layer(100, 1, 10, 0.5, 1.4), name: 'other' }], ranking)).toBe(first);
    expect(fields.solve([layer(100, 1, 10, 0.5, 1.41)], ranking)).not.toBe(first);
    expect(fields.solve([layer(100, 1, 10, 0.5, 1.4)], { accuracy: 'fine' })).not.toBe(first);
    expect([fields.hitCount, fields.missCount, fields.size]).toEqual([1, 3, 3]);
  });

  it('forget the least recently used first and never exceed their capacity', () => {
    const fields = makeLightFields(2);
    const stack = (mu: number) => [layer(100, mu, 10, 0.5, 1.4)];
    const one = fields.solve(stack(1), ranking);
    fields.solve(stack(2), ranking);
    fields.solve(stack(1), ranking);
    fields.solve(stack(3), ranking);
    expect(fields.size).toBe(2);
    expect(fields.solve(stack(1), ranking)).toBe(one);
    fields.solve(stack(2), ranking);
    expect(fields.missCount).toBe(4);
  });
});
