import { z } from 'zod';
import { pageQuery } from '../../http/paging.js';
import { instant, quantity, queryQuantity, text, whenever } from '../../schemas/numbers.js';
import { skinQuery } from '../../schemas/skin-query.js';

const asOf = instant.optional().describe('Time to stand in the provenance; the clock when absent');
const wavelength = (description: string) => queryQuantity('nm', 100, 20_000, description).optional();

export const ChromophoreParams = z.strictObject({ id: z.string().max(64) });
export const ChromophoresQuery = z.strictObject(pageQuery);

export const ChromophoreItem = z
  .object({
    id: z.string(),
    name: z.string(),
    quantity: z.string(),
    unit: z.string(),
    form: z.enum(['table', 'power-law', 'exponential']),
    fromNm: z.number(),
    toNm: z.number(),
    points: z.int().describe('Points of the table; 0 for a closed form'),
    sources: z.array(z.object({ key: z.string(), citation: z.string() })),
    status: z.enum(['read', 'read-secondary', 'derived', 'from-memory']).describe('How far the figures can be trusted'),
    note: z.string(),
    spread: z
      .object({ factor: z.number(), fromNm: z.number(), toNm: z.number() })
      .optional()
      .describe('Stretch that is known only to this factor'),
    own: z
      .object({ createdAt: z.string(), measuredAt: z.string().nullable(), relativeUncertainty: z.number().nullable() })
      .optional()
      .describe('Present on spectra that the clinic measured itself'),
    alternativeTo: z.string().optional().describe('The chromophore of which this is a second table'),
  })
  .meta({ id: 'Chromophore' });

const fewestPoints = 2;
const mostPoints = 5000;
const column = (unit: string, min: number, max: number, description: string) =>
  z
    .array(quantity(unit, min, max, description))
    .min(fewestPoints, { error: `needs at least ${fewestPoints} points` })
    .max(mostPoints, { error: `takes at most ${mostPoints} points` });

export const OwnChromophoreRequest = z
  .strictObject({
    name: text(80, 'What it is: an ink, a dye, a tan'),
    source: text(400, 'How, by whom and with what it was measured, or where it was published'),
    measuredAt: instant.optional().describe('When it was measured'),
    relativeUncertainty: quantity('', 0, 2, 'Standard uncertainty of the absorption over its value (k = 1)').optional(),
    note: text(400, 'Anything else that a reader should know').optional(),
    wavelengthsNm: column('nm', 100, 20_000, 'Vacuum wavelength').superRefine((values, context) => {
      const at = values.findIndex((value, i) => i > 0 && !(value > values[i - 1]!));
      if (at > 0)
        context.addIssue({ code: 'custom', path: [at], message: `must be greater than ${values[at - 1]} nm before it` });
    }),
    absorptionsPerCm: column('1/cm', 0, 1e7, 'Absorption coefficient, natural base'),
  })
  .refine(
    (body) => !body?.wavelengthsNm || !body?.absorptionsPerCm || body.wavelengthsNm.length === body.absorptionsPerCm.length,
    {
      error: 'must be as many as wavelengthsNm',
      path: ['absorptionsPerCm'],
      ...whenever,
    },
  )
  .meta({
    id: 'OwnChromophoreRequest',
    description: "A clinic's own measured spectrum; its id can then stand as chromophoreId in that clinic's calculations",
    examples: [
      {
        name: 'black ink, lot 7',
        source: 'own measurement, integrating sphere, diluted 1:1000 and scaled back',
        measuredAt: '2026-02-11T10:00:00+01:00',
        relativeUncertainty: 0.1,
        wavelengthsNm: [500, 700, 900, 1100],
        absorptionsPerCm: [5200, 4700, 4300, 4000],
      },
    ],
  });

export const SpectrumQuery = z.strictObject({
  fromNm: wavelength('First wavelength; the start of the spectrum when absent'),
  toNm: wavelength('Last wavelength; the end of the spectrum when absent'),
  stepNm: queryQuantity(
    'nm',
    0.01,
    5000,
    'Step; the least of 1, 2, 5, 10 and 20 that gives 2000 points or fewer when absent',
  ).optional(),
  hemoglobinGPerL: queryQuantity('g/L', 0.1, 400, 'Hemoglobin per volume; whole blood of 150 when absent').optional(),
  concentrationGPerL: queryQuantity(
    'g/L',
    1e-6,
    1000,
    'Concentration of a solute other than hemoglobin; 1 when absent',
  ).optional(),
  asOf,
});

export const SpectrumResult = z
  .object({
    wavelengthsNm: z.array(z.number()),
    absorptionsPerCm: z.array(z.number()).describe('Absorption coefficient, natural base'),
    molarExtinctionsPerCmPerM: z.array(z.number()).optional().describe('Decadic, where the source gives it'),
  })
  .meta({ id: 'SpectrumResult', description: 'Arrays of one length, in ascending wavelength' });

export const WavelengthsQuery = skinQuery({
  depthMm: queryQuantity('mm', 0.005, 8, 'Depth of the chromophore below the surface'),
  fromNm: wavelength('First wavelength; 400, or the start of the spectrum, when absent'),
  toNm: wavelength('Last wavelength; 2400, or the end of the spectrum, when absent'),
  stepNm: queryQuantity('nm', 1, 500, 'Step between the laser lines; 10 when absent').optional(),
  spotDiameterMm: queryQuantity('mm', 0.1, 50, 'Diameter of a flat-top spot; 7 when absent').optional(),
  hemoglobinGPerL: queryQuantity('g/L', 0.1, 400, 'Hemoglobin per volume; whole blood of 150 when absent').optional(),
  concentrationGPerL: queryQuantity(
    'g/L',
    1e-6,
    1000,
    'Concentration of a solute other than hemoglobin; 1 when absent',
  ).optional(),
  asOf,
});

export const WavelengthsResult = z
  .object({
    items: z
      .array(
        z.object({
          wavelengthNm: z.number(),
          absorptionPerCm: z.number(),
          fluenceRatioAtDepth: z.number().describe('Internal fluence on the axis over the fluence on the skin'),
          heatingContrast: z
            .number()
            .describe(
              'Heat per volume in the chromophore over the mean of the epidermis; hemoglobins flattened in vessels of the background diameter',
            ),
          medium: z.string().optional().describe('Laser media that emit this wavelength'),
        }),
      )
      .describe('Best first'),
    considered: z.int(),
    fullAnswer: z.string().describe('Where thresholds, pulse durations and cooling are taken into account'),
  })
  .meta({
    id: 'WavelengthsResult',
    description: 'The short answer: which wavelengths heat this chromophore rather than the epidermis',
  });
