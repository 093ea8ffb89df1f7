import { describe, expect, it } from 'vitest';
import { interpolateLog } from '../../../domain/numeric/interpolate.js';
import { DomainError } from '../../../domain/quantities/errors.js';

describe('interpolation of tables', () => {
  const xs = [100, 200, 400, 500];
  const ys = [1, 100, 0, 8];

  it('is exact at every point and geometric between positive neighbors', () => {
    xs.forEach((x, i) => {
      expect(interpolateLog(xs, ys, x, 'x')).toBe(ys[i]);
    });
    expect(interpolateLog(xs, ys, 150, 'x')).toBeCloseTo(10, 12);
  });

  it('is straight next to a zero', () => {
    expect(interpolateLog(xs, ys, 300, 'x')).toBeCloseTo(50, 12);
    expect(interpolateLog(xs, ys, 450, 'x')).toBeCloseTo(4, 12);
  });

  it.each([99.999, 500.001, Number.NaN, Number.POSITIVE_INFINITY])('refuses %d rather than extrapolate', (x) => {
    expect(() => interpolateLog(xs, ys, x, 'wavelengthNm')).toThrowError(DomainError);
    expect(() => interpolateLog(xs, ys, x, 'wavelengthNm')).toThrow(/wavelengthNm is .*from 100 to 500/);
  });
});
