import { z } from 'zod';
import { reproducible } from '../../schemas/calculation.js';
import { quantity } from '../../schemas/numbers.js';

const diffusivity = quantity('mm2/s', 1e-4, 1000, 'Thermal diffusivity; that of soft tissue when absent');

export const RelaxationRequest = z
  .strictObject({
    geometry: z.enum(['plane', 'cylinder', 'sphere'], { error: 'must be one of plane, cylinder, sphere' }),
    sizeUm: quantity('um', 1e-3, 1e6, 'Thickness of a plane, diameter of a cylinder or sphere'),
    diffusivityMm2PerS: diffusivity.optional(),
    ...reproducible,
  })
  .meta({ id: 'RelaxationRequest', examples: [{ geometry: 'cylinder', sizeUm: 100 }] });

export const RelaxationResult = z
  .object({
    relaxationTimeS: z.number(),
    geometryFactor: z.number(),
    diffusivityMm2PerS: z.number(),
  })
  .meta({ id: 'RelaxationResult', description: 'size squared over (factor x diffusivity)' });
