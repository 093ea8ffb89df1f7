import { z } from 'zod';
import { SpotSchema, WavelengthNm } from '../../schemas/beam.js';
import { reproducible } from '../../schemas/calculation.js';
import { quantity, whenever } from '../../schemas/numbers.js';
import { OpticalSkinSchema } from '../../schemas/skin.js';

export const LightRequest = z
  .strictObject({
    skin: OpticalSkinSchema,
    wavelengthNm: WavelengthNm.optional().describe('Needed with a skin, refused with explicit layers'),
    spot: SpotSchema.optional(),
    broadBeam: z.literal(true, { error: 'must be true, or left out in favor of spot' }).optional(),
    depthsMm: z
      .array(quantity('mm', 0, 1000, 'Depth below the surface'))
      .min(1, { error: 'needs at least one depth' })
      .max(500, { error: 'takes at most 500 depths' }),
    ...reproducible,
  })
  .refine((body) => (body?.skin?.layers === undefined) === (body?.wavelengthNm !== undefined), {
    error: 'wavelengthNm is needed with a skin and refused with explicit layers',
    path: ['wavelengthNm'],
    ...whenever,
  })
  .refine((body) => (body?.spot === undefined) !== (body?.broadBeam === undefined), {
    error: 'needs exactly one of spot or broadBeam',
    path: ['spot'],
    ...whenever,
  })
  .meta({
    id: 'LightRequest',
    examples: [
      { skin: { phototype: 'II' }, wavelengthNm: 585, spot: { shape: 'circle', diameterMm: 7 }, depthsMm: [0, 0.1, 0.4, 1] },
    ],
  });

export const LightResult = z
  .object({
    depthsMm: z.array(z.number()),
    fluenceRatios: z
      .array(z.number().min(0))
      .describe('Fluence rate on the beam axis over the incident irradiance on the axis; may exceed 1'),
    specularReflectance: z.number(),
    diffuseReflectance: z.number(),
    transmittance: z.number(),
    penetrationDepthMm: z.number().nullable().describe('Where the fluence rate has fallen to 1/e of its greatest value'),
    relativeErrorFraction: z
      .number()
      .describe('Greatest relative error of the fluence ratios seen against Monte Carlo for such a beam'),
  })
  .meta({ id: 'LightResult' });
