import { z } from 'zod';
import { instant, queryQuantity } from '../../schemas/numbers.js';
import { skinQuery } from '../../schemas/skin-query.js';

export const TissueOpticsQuery = skinQuery({
  wavelengthNm: queryQuantity('nm', 350, 12_000, 'Vacuum wavelength'),
  hemoglobinTable: z
    .enum(['prahl1998', 'zijlstra1991'], { error: 'must be one of prahl1998, zijlstra1991' })
    .optional()
    .describe('Hemoglobin table; prahl1998 when absent. zijlstra1991 reaches from 450 to 1000 nm'),
  asOf: instant.optional().describe('Time to stand in the provenance; the clock when absent'),
});

export const TissueOpticsResult = z
  .object({
    wavelengthNm: z.number(),
    melanosomeFraction: z.number(),
    melanosomeFractionLow: z.number().describe('About two standard deviations below'),
    melanosomeFractionHigh: z.number().describe('About two standard deviations above'),
    itaDegrees: z.number().nullable().describe('Individual typology angle; null when pigmentation was given otherwise'),
    bloodSpreadFactor: z.number().describe('Greatest over least of the published absorptions of this blood at this wavelength'),
    layers: z.array(
      z.object({
        name: z.string(),
        thicknessUm: z.number(),
        absorptionPerCm: z.number(),
        scatteringPerCm: z.number(),
        anisotropy: z.number(),
        refractiveIndex: z.number(),
      }),
    ),
  })
  .meta({ id: 'TissueOpticsResult', description: 'Optical layers of the skin, topmost first' });
