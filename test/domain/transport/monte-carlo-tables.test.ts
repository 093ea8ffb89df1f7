import { expect, it } from 'vitest';
import { exponentialZiggurat } from '../../../domain/transport/monte-carlo-tables.js';

it('[Marsaglia2000] the strips of the exponential ziggurat close: 256 equal areas under the curve, to 1e-9', () => {
  const { scales, insideBelow, heights, tailStart } = exponentialZiggurat();
  const width = (strip: number) => scales[strip]! * 2 ** 24;
  const base = width(0) * heights[1]!;
  expect(base).toBeCloseTo(tailStart * Math.exp(-tailStart) + Math.exp(-tailStart), 12);
  for (let strip = 1; strip < 256; strip++) {
    expect(width(strip)).toBeLessThan(width(strip - 1));
    expect(width(strip) * (heights[strip + 1]! - heights[strip]!)).toBeCloseTo(base, 9);
    expect(insideBelow[strip]).toBeLessThan(2 ** 24);
  }
});
