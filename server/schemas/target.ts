import { z } from 'zod';
import { quantity } from './numbers.js';

const depthMm = quantity('mm', 0.01, 20, 'Depth of the center of the target below the surface');

export const TargetSchema = z
  .discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('vessel'), diameterUm: quantity('um', 5, 3000, 'Diameter of the vessel'), depthMm }),
    z
      .strictObject({
        kind: z.literal('hair-follicle'),
        shaftDiameterUm: quantity('um', 15, 1000, 'Diameter of the pigmented shaft, the heater'),
        follicleDiameterUm: quantity('um', 15, 1000, 'Diameter of the follicle, whose edge is to be damaged'),
        depthMm,
        melaninFraction: quantity(
          '',
          0,
          1,
          'Share of the melanosome formula that the shaft absorbs; a dark shaft is about 0.55',
        ).optional(),
      })
      .refine((target) => target.follicleDiameterUm >= target.shaftDiameterUm, {
        error: 'must not be smaller than shaftDiameterUm',
        path: ['follicleDiameterUm'],
      }),
    z.strictObject({
      kind: z.literal('epidermal-pigment'),
      melanosomeFraction: quantity(
        '',
        0,
        0.5,
        'Volume fraction of melanosomes in the epidermis of the lesion; that of the skin when absent',
      ).optional(),
    }),
    z.strictObject({
      kind: z.literal('dermal-pigment'),
      granuleDiameterUm: quantity('um', 0.02, 50, 'Diameter of a granule'),
      depthMm,
      chromophoreId: z
        .string({ error: 'must be the id of a chromophore' })
        .min(1)
        .max(64)
        .describe('Chromophore that the granule consists of'),
    }),
    z.strictObject({
      kind: z.literal('sebaceous-gland'),
      diameterUm: quantity('um', 50, 3000, 'Diameter of the gland'),
      depthMm,
    }),
    z.strictObject({ kind: z.literal('water-layer'), depthMm }),
  ])
  .meta({ id: 'Target', description: 'What is to be heated' });
