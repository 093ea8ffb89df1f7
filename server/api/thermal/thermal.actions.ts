import type { z } from 'zod';
import { Remarks } from '../../../domain/quantities/caution.js';
import { geometryFactor, relaxationTimeS, tissueDiffusivityMm2PerS } from '../../../domain/thermal/relaxation.js';
import type { RelaxationRequest } from './thermal.schema.js';

export function relax(body: z.output<typeof RelaxationRequest>) {
  const remarks = new Remarks();
  const diffusivityMm2PerS = body.diffusivityMm2PerS ?? tissueDiffusivityMm2PerS;
  if (body.diffusivityMm2PerS === undefined) {
    remarks.assume({
      name: 'diffusivityMm2PerS',
      value: diffusivityMm2PerS,
      unit: 'mm2/s',
      source: 'AndersonParrish1983',
      status: 'from-memory',
    });
  }
  remarks.caution(
    'relaxation-rule-contested',
    'Papers disagree on whether relaxation time, thermal damage time or a rate process should set the pulse duration.',
  );
  const result = {
    relaxationTimeS: relaxationTimeS(body.geometry, body.sizeUm, diffusivityMm2PerS),
    geometryFactor: geometryFactor[body.geometry],
    diffusivityMm2PerS,
  };
  return { result, remarks, body };
}
