import type { z } from 'zod';
import { spotAreaCm2 } from '../../../domain/beam/spot-area.js';
import {
  circleGridCoverage,
  pulsesForArea,
  randomCoverage,
  rectangleGridCoverage,
  spacingForPulsesMm,
} from '../../../domain/dosimetry/coverage.js';
import { Remarks } from '../../../domain/quantities/caution.js';
import type { CoverageRequest } from './coverage.schema.js';

export function cover(body: z.output<typeof CoverageRequest>) {
  const remarks = new Remarks();
  const { spot, pattern } = body;
  const areaMm2 = body.area.widthMm * body.area.heightMm;
  remarks.caution(
    'edges-left-out',
    'The pattern is taken as endless: at the edges of the area pulses fall partly outside, and more are needed.',
  );
  remarks.caution('stacked-pulses', 'Places under two pulses get twice the fluence; margins of single pulses do not hold there.');
  if (spot.shape === 'gaussian')
    remarks.caution('gaussian-edge', 'A Gaussian spot is counted to its 1/e2 radius; it has no edge.');
  if (pattern === 'random') {
    const pulseCount = body.pulseCount!;
    return {
      result: {
        ...randomCoverage((pulseCount * spotAreaCm2(spot) * 100) / areaMm2),
        pulseCount,
        spacingMm: null as number | null,
      },
      remarks,
      body,
    };
  }
  const spacingMm = body.spacingMm ?? spacingForPulsesMm(pattern, body.pulseCount!, areaMm2);
  const coverage =
    'diameterMm' in spot
      ? circleGridCoverage(pattern, spacingMm / spot.diameterMm)
      : rectangleGridCoverage(spot.widthMm, 'heightMm' in spot ? spot.heightMm : spot.widthMm, spacingMm);
  return {
    result: {
      ...coverage,
      pulseCount: body.pulseCount ?? pulsesForArea(pattern, spacingMm, areaMm2),
      spacingMm: spacingMm as number | null,
    },
    remarks,
    body,
  };
}
