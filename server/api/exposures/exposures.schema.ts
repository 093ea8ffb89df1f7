import { z } from 'zod';
import { pageQuery } from '../../http/paging.js';
import { asOfQuery } from '../../http/records.js';
import { CoolingSchema, PulseSchema, RepetitionRateHz, SpotSchema, WavelengthNm } from '../../schemas/beam.js';
import { PanelSettingSchema } from '../../schemas/device.js';
import { freeText } from '../../schemas/free-text.js';
import { count, id, instant, text, whenever } from '../../schemas/numbers.js';
import { hasOnePigmentForm, skinFields } from '../../schemas/skin.js';

const Unknown = z
  .strictObject({ unknown: freeText(200, 'Why it is not known') })
  .meta({ id: 'Unknown', description: 'Not known, and why: a value of its own' });

const orUnknown = <T extends z.ZodType>(known: T) => z.union([known, Unknown]).optional();

const Pigmentation = z
  .strictObject({
    phototype: skinFields.phototype,
    itaDegrees: skinFields.itaDegrees,
    lightnessL: skinFields.lightnessL,
    yellownessB: skinFields.yellownessB,
    melanosomeFraction: skinFields.melanosomeFraction,
    measuredAt: skinFields.measuredAt,
    tan: skinFields.tan,
  })
  .partial()
  .refine(hasOnePigmentForm, {
    error: 'needs exactly one of phototype, itaDegrees, lightnessL with yellownessB, or melanosomeFraction',
    ...whenever,
  })
  .meta({ id: 'Pigmentation', description: 'Pigmentation of the exposed site' });

const words = (max: number, description: string) => freeText(max, description);

export const exposureFields = {
  deviceId: id,
  externalId: text(128, "The device's or the clinic's own number of the exposure, unique for the device"),
  at: instant.describe('When it happened'),
  wavelengthNm: WavelengthNm,
  spot: SpotSchema,
  pulse: PulseSchema,
  set: PanelSettingSchema,
  pulseCount: count(1, 10_000_000, 'All pulses of the record'),
  stackCount: count(1, 10_000_000, 'Pulses on one place; 1 when absent').optional(),
  courseId: id.optional(),
  protocolId: id.optional(),
  handpiece: orUnknown(text(80, 'Handpiece')),
  repetitionRateHz: orUnknown(RepetitionRateHz),
  cooling: orUnknown(CoolingSchema),
  passNumber: orUnknown(count(1, 1000, 'Number of the pass over the site, from 1')),
  site: orUnknown(words(80, 'Body site and side')),
  pigmentation: orUnknown(Pigmentation),
  eyewear: orUnknown(words(200, 'Eye protection of patient and staff')),
  endPoint: orUnknown(
    words(120, 'What was seen at once: none, erythema, perifollicular edema, purpura, whitening, graying, blister, ...'),
  ),
  operator: orUnknown(words(80, 'Who operated, as a staff code')),
  notes: words(2000, 'Remarks').optional(),
};

export const ExposureRequest = z
  .strictObject(exposureFields)
  .refine((exposure) => !(exposure?.stackCount !== undefined && exposure.stackCount > exposure.pulseCount), {
    error: 'must not be above pulseCount',
    path: ['stackCount'],
    ...whenever,
  })
  .meta({
    id: 'ExposureRequest',
    description: 'One logged pulse, stack, or group of pulses with one setting',
    example: {
      deviceId: '0197a3c2-0000-7000-8000-000000000001',
      externalId: '2026-03-02/0001',
      at: '2026-03-02T10:15:30+01:00',
      wavelengthNm: 595,
      spot: { shape: 'circle', diameterMm: 7 },
      pulse: { durationS: 0.0015 },
      set: { fluenceJPerCm2: 8 },
      pulseCount: 12,
      site: 'left cheek',
      endPoint: 'purpura',
    },
  });

export const mostItems = 10_000;

export const ExposureBatch = z
  .strictObject({ items: z.array(ExposureRequest).min(1).max(mostItems) })
  .meta({ id: 'ExposureBatch', description: 'Up to 10,000 exposures, each stored or refused on its own' });

export const ExposureBody = z
  .union([ExposureRequest, ExposureBatch])
  .describe('One exposure or a batch; as application/x-ndjson one exposure per line, any number of lines');

const Dose = {
  setFluenceJPerCm2: z.number(),
  deliveredFluenceJPerCm2: z.number(),
  lowJPerCm2: z.number().describe('Lower end of the interval at k = 2'),
  highJPerCm2: z.number(),
};

export const ExposureItem = z
  .looseObject({
    id: z.string(),
    recordedAt: z.string(),
    deviceId: z.string(),
    externalId: z.string(),
    at: z.string(),
    status: z.enum(['stored', 'corrected', 'entered-in-error']),
    ...Dose,
    relativeUncertainty: z.number(),
    coverageFactor: z.number(),
    calibration: z.object({
      basis: z.enum(['measured', 'interpolated', 'outside-range', 'not-calibrated']),
      factor: z.number(),
      lapsed: z.boolean(),
      closedByService: z.boolean(),
      calibrationIds: z.array(z.string()),
    }),
    asFirstRecorded: z
      .object({
        deliveredFluenceJPerCm2: z.number(),
        lowJPerCm2: z.number(),
        highJPerCm2: z.number(),
        calibrationIds: z.array(z.string()),
        model: z.string(),
      })
      .describe('What was computed when the record came in'),
    restated: z.boolean().describe('What is known now gives another delivered fluence than when the record came in'),
    incomplete: z.array(z.string()).describe('What a complete record should hold and this one lacks'),
    corrections: z.int(),
  })
  .meta({ id: 'Exposure' });

const Fault = z.object({ pointer: z.string(), detail: z.string() });

export const StoredExposure = z
  .object({
    id: z.string(),
    status: z.enum(['stored', 'duplicate']),
    ...Dose,
    incomplete: z.array(z.string()),
    alerts: z.array(z.looseObject({ id: z.string(), rule: z.string(), severity: z.string(), text: z.string() })),
  })
  .meta({ id: 'StoredExposure' });

export const BatchResult = z
  .object({
    index: z.int(),
    status: z.enum(['stored', 'duplicate', 'rejected']),
    id: z.string().optional(),
    errors: z.array(Fault).optional(),
    deliveredFluenceJPerCm2: z.number().optional(),
    lowJPerCm2: z.number().optional(),
    highJPerCm2: z.number().optional(),
    alerts: z.array(z.looseObject({ id: z.string(), rule: z.string(), severity: z.string() })).optional(),
  })
  .meta({ id: 'BatchResult' });

export const ExposureQuery = z.strictObject({
  deviceId: id.optional(),
  courseId: id.optional(),
  from: instant.optional().describe('Not before this time'),
  to: instant.optional().describe('Before this time'),
  ...pageQuery,
  ...asOfQuery,
});

export const correctable = exposureFieldsWithout(['deviceId', 'externalId', 'at', 'courseId']);

function exposureFieldsWithout(names: readonly (keyof typeof exposureFields)[]) {
  const kept = Object.entries(exposureFields).filter(([name]) => !names.includes(name as keyof typeof exposureFields));
  return z.strictObject(Object.fromEntries(kept) as Partial<typeof exposureFields>).partial();
}

export const CorrectionRequest = z
  .strictObject({
    reason: freeText(500, 'Why it is corrected'),
    by: text(80, 'Who corrects, as a staff code').optional(),
    changes: correctable
      .optional()
      .describe(
        'Fields with their right values; device, external id, time and course stand: mark the record as entered in error instead',
      ),
    enteredInError: z.literal(true).optional().describe('The exposure never happened, or not so; it stays readable'),
  })
  .refine((correction) => (correction?.changes === undefined) !== (correction?.enteredInError === undefined), {
    error: 'needs exactly one of changes and enteredInError',
    ...whenever,
  })
  .meta({
    id: 'CorrectionRequest',
    example: { reason: 'Spot read from the wrong handpiece', by: 'LP-1', changes: { spot: { shape: 'circle', diameterMm: 10 } } },
  });

export const CorrectionItem = z
  .looseObject({ id: z.string(), exposureId: z.string(), recordedAt: z.string(), reason: z.string(), by: z.string() })
  .meta({ id: 'Correction' });
