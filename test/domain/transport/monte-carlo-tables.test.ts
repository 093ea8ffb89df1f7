import { expect, it } from 'vitest';
import { azimuthSectors, exponentialZiggurat } from '../../../domain/transport/monte-carlo-tables.js';

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

it('the sectors of the azimuth meet: turned by half a sector by its series, each ends where the next begins, to 1e-11', () => {
  const { cosines, sines, turnUnit } = azimuthSectors();
  const turned = (sector: number, turn: number) => {
    const sine = turn * (1 - turn ** 2 / 6);
    const cosine = 1 - turn ** 2 * (0.5 - turn ** 2 / 24);
    return [cosines[sector]! * cosine - sines[sector]! * sine, sines[sector]! * cosine + cosines[sector]! * sine] as const;
  };
  const half = 2 ** 23 * turnUnit;
  for (let sector = 0; sector < 256; sector++) {
    const [x, y] = turned(sector, half);
    const [nextX, nextY] = turned((sector + 1) % 256, -half);
    expect(Math.hypot(x - nextX, y - nextY)).toBeLessThan(1e-11);
    expect(Math.abs(Math.hypot(x, y) - 1)).toBeLessThan(1e-11);
  }
});
