import { z } from 'zod';
import { CoolingSchema, PulseDurationS, SpotSchema, WavelengthNm } from '../../schemas/beam.js';
import { reproducible } from '../../schemas/calculation.js';
import { count, id, quantity, whenever } from '../../schemas/numbers.js';
import { SkinSchema } from '../../schemas/skin.js';
import { TargetSchema } from '../../schemas/target.js';

const Wavelengths = z.union([
  z.array(WavelengthNm).min(1, { error: 'needs at least one wavelength' }).max(2000, { error: 'takes at most 2000 wavelengths' }),
  z
    .strictObject({ fromNm: WavelengthNm, toNm: WavelengthNm, stepNm: quantity('nm', 0.1, 10_000, 'Step') })
    .refine(({ fromNm, toNm }) => fromNm <= toNm, { error: 'must not exceed toNm', path: ['fromNm'] }),
]);

const PulseDurations = z.union([
  z.array(PulseDurationS).min(1, { error: 'needs at least one duration' }).max(200, { error: 'takes at most 200 durations' }),
  z
    .strictObject({
      fromS: PulseDurationS,
      toS: PulseDurationS,
      count: count(1, 200, 'Durations, spaced evenly in their logarithm'),
    })
    .refine(({ fromS, toS }) => fromS <= toS, { error: 'must not exceed toS', path: ['fromS'] }),
]);

const Candidates = z
  .strictObject({
    wavelengthsNm: Wavelengths.optional(),
    deviceIds: z
      .array(id)
      .min(1, { error: 'needs at least one device' })
      .max(100, { error: 'takes at most 100 devices' })
      .optional(),
    media: z.literal('all').optional(),
  })
  .refine((value) => Object.values(value ?? {}).filter((given) => given !== undefined).length === 1, {
    error: 'needs exactly one of wavelengthsNm, deviceIds or media',
    ...whenever,
  });

export const RankingRequest = z
  .strictObject({
    skin: SkinSchema,
    target: TargetSchema,
    spot: SpotSchema.optional(),
    spots: z
      .array(SpotSchema)
      .min(1, { error: 'needs at least one spot' })
      .max(50, { error: 'takes at most 50 spots' })
      .optional(),
    cooling: CoolingSchema.optional(),
    candidates: Candidates,
    pulseDurationsS: PulseDurations.optional().describe(
      'Fractions and multiples of the relaxation time of the target when absent',
    ),
    safetyFactor: quantity('', 1, 100, 'Least ratio of limit to threshold that counts as a window; 1 when absent').optional(),
    samples: count(16, 1024, 'Samples of pigment, diameter, depth, optics and heat for the probability of a window').optional(),
    seed: count(0, 4_294_967_295, 'Seed of the samples; 1 when absent').optional(),
    limit: count(1, 500, 'Items returned; 50 when absent').optional(),
    ...reproducible,
  })
  .refine((body) => (body?.spot === undefined) !== (body?.spots === undefined), {
    error: 'needs exactly one of spot or spots',
    path: ['spot'],
    ...whenever,
  })
  .meta({
    id: 'RankingRequest',
    examples: [
      {
        skin: { phototype: 'II' },
        target: { kind: 'vessel', diameterUm: 100, depthMm: 0.4 },
        spot: { shape: 'circle', diameterMm: 7 },
        cooling: { kind: 'contact', temperatureC: 5 },
        candidates: { wavelengthsNm: [532, 585, 595, 755, 1064] },
        pulseDurationsS: [0.0015, 0.01],
      },
    ],
  });

const limits = ['basal-layer', 'melanosome', 'surface', 'vaporization', 'breakdown'] as const;

const RankedItem = z
  .object({
    rank: z.int(),
    wavelengthNm: z.number(),
    pulseDurationS: z.number(),
    spotDiameterMm: z.number().describe('Diameter, or of the circle of equal area'),
    deviceId: z.string().optional(),
    medium: z.string().optional(),
    targetThresholdJPerCm2: z.number().nullable(),
    epidermalLimitJPerCm2: z.number().nullable(),
    therapeuticRatio: z.number().nullable(),
    absorptionContrast: z.number().nullable(),
    fluenceRatioAtTarget: z.number().nullable(),
    limitedBy: z.enum(limits).nullable(),
    deliverable: z.boolean(),
    reasons: z.array(z.string()),
    probabilityOfWindow: z.number().min(0).max(1).optional(),
    targetThresholdQuantilesJPerCm2: z
      .array(z.number().nullable())
      .optional()
      .describe('5 %, 50 % and 95 %; null where no fluence has the effect'),
    epidermalLimitQuantilesJPerCm2: z.array(z.number()).optional().describe('5 %, 50 % and 95 %'),
    dominantInputs: z
      .array(z.object({ input: z.string(), varianceFraction: z.number() }))
      .optional()
      .describe('Shares of the variance of the logarithm of the ratio'),
  })
  .meta({ id: 'RankedCandidate' });

export const RankingResult = z
  .object({
    items: z.array(RankedItem),
    best: RankedItem.nullable().describe('The first with a window that can be delivered; null when there is none'),
    relaxationTimeS: z.number(),
    considered: z.int(),
    rejected: z.int().describe('Candidates without a window'),
  })
  .meta({ id: 'RankingResult' });
