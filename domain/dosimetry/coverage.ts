import { assertWithin } from '../quantities/errors.js';

/** Area that two circles of one diameter share over the area of one, their centers `spacing` diameters apart.
 *  Valid: spacing at least 0. @source geometry: the lens of two circles */
export function circleOverlapFraction(spacing: number): number {
  if (spacing >= 1) return 0;
  return (2 / Math.PI) * (Math.acos(spacing) - spacing * Math.sqrt(1 - spacing * spacing));
}

export interface Coverage {
  readonly neighborOverlapFraction: number;
  readonly uncoveredFraction: number;
  readonly doubleCoveredFraction: number;
  readonly meanPulsesPerPoint: number;
}

type Grid = 'hexagonal' | 'square';

/** Area of the cell that belongs to one spot, in squared spacings. */
const cellArea: Readonly<Record<Grid, number>> = { hexagonal: Math.sqrt(3) / 2, square: 1 };

/** Coverage of an endless grid of circles `spacing` diameters apart, by counting on a fine, evenly spread set of points of one cell.
 *  Accuracy 1e-3 of the area. Valid: spacing 0.1 to 10. Throws: out-of-range. @source geometry */
export function circleGridCoverage(grid: Grid, spacing: number): Coverage {
  assertWithin('spacing over diameter', spacing, 0.1, 10);
  const side = 200; // points along one edge of the cell
  const reach = Math.ceil(1 / spacing) + 1;
  const [ux, uy] = grid === 'hexagonal' ? [0.5, Math.sqrt(3) / 2] : [0, 1];
  const limit = 0.25 / (spacing * spacing); // squared radius in squared spacings
  let none = 0;
  let several = 0;
  let hits = 0;
  for (let i = 0; i < side; i++) {
    for (let j = 0; j < side; j++) {
      const a = (i + 0.5) / side;
      const b = (j + 0.5) / side;
      let covered = 0;
      for (let m = -reach; m <= reach + 1; m++) {
        for (let n = -reach; n <= reach + 1; n++) {
          const x = a - m + (b - n) * ux;
          const y = (b - n) * uy;
          if (x * x + y * y <= limit) covered++;
        }
      }
      hits += covered;
      if (covered === 0) none++;
      else if (covered > 1) several++;
    }
  }
  const points = side * side;
  return {
    neighborOverlapFraction: circleOverlapFraction(spacing),
    uncoveredFraction: none / points,
    doubleCoveredFraction: several / points,
    meanPulsesPerPoint: hits / points,
  };
}

/** Coverage of an endless grid of rectangles set edge to edge at a spacing along each side, in closed form: along each axis a share of
 *  points lies in one, in two or in no rectangle. Valid: spacing at least half of the side. Throws: out-of-range. @source geometry */
export function rectangleGridCoverage(widthMm: number, heightMm: number, spacingMm: number): Coverage {
  const axis = (size: number) => {
    assertWithin('spacing over side', spacingMm / size, 0.5, 100);
    const covered = Math.min(1, size / spacingMm);
    const twice = Math.max(0, size / spacingMm - 1);
    return { covered, once: covered - twice, overlap: Math.max(0, 1 - spacingMm / size), mean: size / spacingMm };
  };
  const [x, y] = [axis(widthMm), axis(heightMm)];
  const covered = x.covered * y.covered;
  return {
    neighborOverlapFraction: x.overlap,
    uncoveredFraction: 1 - covered,
    doubleCoveredFraction: covered - x.once * y.once,
    meanPulsesPerPoint: x.mean * y.mean,
  };
}

/** Coverage by pulses set down at random over a large area: the number of pulses over a point follows Poisson's law with the mean of
 *  their area over that of the field. Two pulses in a row need not touch, so neighbors have no overlap of their own. Throws: out-of-range.
 *  @source Poisson statistics of random disks */
export function randomCoverage(meanPulsesPerPoint: number): Coverage {
  assertWithin('mean pulses per point', meanPulsesPerPoint, 0, 1000);
  const uncovered = Math.exp(-meanPulsesPerPoint);
  return {
    neighborOverlapFraction: 0,
    uncoveredFraction: uncovered,
    doubleCoveredFraction: 1 - uncovered * (1 + meanPulsesPerPoint),
    meanPulsesPerPoint,
  };
}

/** Spots that a grid of a spacing needs for an area. */
export function pulsesForArea(grid: Grid, spacingMm: number, areaMm2: number): number {
  return Math.max(1, Math.ceil(areaMm2 / (cellArea[grid] * spacingMm * spacingMm)));
}

/** Spacing at which a count of spots on a grid fills an area. */
export function spacingForPulsesMm(grid: Grid, pulseCount: number, areaMm2: number): number {
  return Math.sqrt(areaMm2 / (pulseCount * cellArea[grid]));
}
