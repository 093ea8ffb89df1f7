import { z } from 'zod';
import { pageQuery } from '../../http/paging.js';
import { ProvenanceSchema } from '../../http/replies.js';
import { SpotSchema, WavelengthNm } from '../../schemas/beam.js';
import { reproducible, seed } from '../../schemas/calculation.js';
import { count, id, quantity, whenever } from '../../schemas/numbers.js';
import { OpticalSkinSchema } from '../../schemas/skin.js';

const ascending = (values: readonly number[]) => values.every((value, i) => i === 0 || value > values[i - 1]!);

const BeamProfileSchema = z
  .strictObject({
    radiiMm: z
      .array(quantity('mm', 0, 100, 'Distance from the axis'))
      .min(2, { error: 'needs at least two radii' })
      .max(64, { error: 'takes at most 64 radii' })
      .refine((radii) => radii[0] === 0 && ascending(radii), { error: 'must begin with 0 and ascend' }),
    relativeIrradiances: z.array(quantity('', 0, 100, 'Irradiance over that on the axis')),
  })
  .refine(({ radiiMm, relativeIrradiances }) => radiiMm.length === relativeIrradiances.length, {
    error: 'must be as many as radiiMm',
    path: ['relativeIrradiances'],
  })
  .refine(({ relativeIrradiances }) => relativeIrradiances[0] === 1, {
    error: 'must begin with 1',
    path: ['relativeIrradiances', 0],
  })
  .meta({
    id: 'MeasuredProfile',
    description: 'A round beam by its measured irradiance; straight lines between, nothing beyond the last radius',
  });

const oneOf = (...given: readonly unknown[]) => given.filter((value) => value !== undefined).length === 1;

export const ReferenceRunRequest = z
  .strictObject({
    ...reproducible,
    skin: OpticalSkinSchema,
    wavelengthNm: WavelengthNm.optional(),
    spot: SpotSchema.optional(),
    measuredProfile: BeamProfileSchema.optional(),
    broadBeam: z.literal(true).optional().describe('A beam of unlimited width'),
    depthsMm: z
      .array(quantity('mm', 0, 1000, 'Depth below the surface'))
      .min(1, { error: 'needs at least one depth' })
      .max(64, { error: 'takes at most 64 depths' }),
    photons: count(4000, 1_000_000_000, 'Photons to follow, rounded up to whole chunks').optional(),
    standardErrorTarget: quantity(
      '',
      1e-4,
      0.5,
      'Relative standard error at which every depth is good enough; 0.01 when photons is absent too',
    ).optional(),
    maxSeconds: quantity('s', 1, 3600, 'Longest time to spend; 300 when absent').optional(),
    seed,
  })
  .refine((run) => oneOf(run?.spot, run?.measuredProfile, run?.broadBeam), {
    error: 'needs exactly one of spot, measuredProfile or broadBeam: true',
    ...whenever,
  })
  .refine((run) => (run?.skin?.layers === undefined) === (run?.wavelengthNm !== undefined), {
    error: 'is needed with skin by its pigmentation, and not taken with explicit layers',
    path: ['wavelengthNm'],
    ...whenever,
  })
  .refine((run) => !(run?.photons !== undefined && run?.standardErrorTarget !== undefined), {
    error: 'give photons or standardErrorTarget, not both',
    path: ['standardErrorTarget'],
    ...whenever,
  })
  .meta({
    id: 'ReferenceRunRequest',
    description: 'A light request to be answered by Monte Carlo, and when to stop',
    example: {
      skin: { phototype: 'II' },
      wavelengthNm: 595,
      spot: { shape: 'circle', diameterMm: 7 },
      depthsMm: [0.1, 0.5, 1],
      photons: 100000,
    },
  });

const estimate = z.object({ value: z.number(), standardError: z.number() });

export const ReferenceResult = z
  .object({
    depthsMm: z.array(z.number()),
    fluenceRatios: z.array(z.number()).describe('Monte Carlo fluence rate on the axis over the incident irradiance there'),
    standardErrors: z.array(z.number()),
    resolutionsUm: z.array(z.number()).describe('Half the height of the slice over which each depth is averaged'),
    fastFluenceRatios: z.array(z.number()).describe('The same by the fast solver'),
    differencesInStandardErrors: z
      .array(z.number().nullable())
      .describe('Monte Carlo less fast, over the standard error; null without one'),
    specularReflectance: z.number(),
    diffuseReflectance: estimate,
    transmittance: estimate,
    absorbedFraction: estimate,
    layerAbsorbedFractions: z.array(estimate.extend({ name: z.string() })),
    fast: z.object({ diffuseReflectance: z.number(), transmittance: z.number(), absorbedFraction: z.number() }),
    abandonedFraction: z.number().describe('Light given up on in layers that hardly absorb; 0 in tissue'),
    energyBalanceError: z.number().describe('Of the sum of all light, less 1; rounding alone'),
    photons: z.int(),
    stoppedBy: z.enum(['photons', 'standard-error', 'time']),
    elapsedS: z.number(),
  })
  .meta({ id: 'ReferenceResult' });

export const ReferenceRunItem = z
  .object({
    id: z.string(),
    createdAt: z.string(),
    finishedAt: z.string().nullable(),
    status: z.enum(['queued', 'running', 'done', 'failed', 'cancelled']),
    progressFraction: z.number(),
    photonsDone: z.int(),
    result: ReferenceResult.optional(),
    failure: z.string().optional().describe('Why it failed'),
    cautions: z.array(z.object({ code: z.string(), text: z.string() })),
    assumptions: z.array(
      z.object({
        name: z.string(),
        value: z.union([z.number(), z.string(), z.boolean()]),
        unit: z.string().optional(),
        source: z.string(),
        status: z.string(),
      }),
    ),
    provenance: ProvenanceSchema,
  })
  .meta({ id: 'ReferenceRun' });

export const RunId = z.strictObject({ id });
export const RunQuery = z.strictObject(pageQuery);
