import { z } from 'zod';
import { PulseSchema, RepetitionRateHz, SpotSchema, WavelengthNm } from '../../schemas/beam.js';
import { HandpieceName, PanelSettingSchema } from '../../schemas/device.js';
import { freeText } from '../../schemas/free-text.js';
import { id, instant, quantity, text, whenever } from '../../schemas/numbers.js';

const fraction = (description: string) => quantity('', 0.001, 1, description);

export const CheckRequest = z
  .strictObject({
    measuredAt: instant.describe('When it was measured'),
    wavelengthNm: WavelengthNm,
    spot: SpotSchema,
    pulse: PulseSchema.optional(),
    handpiece: HandpieceName.optional(),
    repetitionRateHz: RepetitionRateHz.optional(),
    set: PanelSettingSchema,
    pulseEnergiesJ: z
      .array(quantity('J', 0, 1e5, 'One reading'))
      .min(1, { error: 'needs at least one reading' })
      .max(1000, { error: 'takes at most 1000 readings' })
      .describe('Every reading, in order'),
    baselinePulseEnergyJ: quantity(
      'J',
      1e-12,
      1e5,
      'Energy at acceptance; the first check of this setting since the last service when absent',
    ).optional(),
    levels: z
      .strictObject({
        warningFraction: fraction('Beyond this: look into it'),
        actionFraction: fraction('Beyond this: act before further use'),
        suspendFraction: fraction('Beyond this: do not use'),
      })
      .optional()
      .describe('Those of the device when absent; kept with the result'),
    meterId: id.optional(),
    warmUpS: quantity('s', 0, 86_400, 'Warm-up before the first reading').optional(),
    by: text(80, 'Who measured, as a staff code'),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .refine(
    ({ levels }) =>
      !levels || (levels.warningFraction <= levels.actionFraction && levels.actionFraction <= levels.suspendFraction),
    {
      error: 'must ascend from warning to suspend',
      path: ['levels'],
    },
  )
  .refine((check) => check?.set === undefined || Object.values(check.set).every((value) => value !== 0), {
    error: 'must be above 0',
    path: ['set'],
    ...whenever,
  })
  .meta({
    id: 'CheckRequest',
    example: {
      measuredAt: '2026-03-02T07:40:00+01:00',
      wavelengthNm: 595,
      spot: { shape: 'circle', diameterMm: 7 },
      set: { fluenceJPerCm2: 8 },
      pulseEnergiesJ: [3.02, 3.05, 3.01, 3.04, 3.03],
      by: 'OP-3',
    },
  });

export const CheckItem = z
  .looseObject({
    id: z.string(),
    deviceId: z.string(),
    recordedAt: z.string(),
    measuredAt: z.string(),
    verdict: z.enum(['pass', 'warning', 'action', 'suspend']),
    meanPulseEnergyJ: z.number(),
    repeatabilityFraction: z.number().nullable().describe('Standard deviation of the readings over their mean'),
    deviationFromDisplayFraction: z.number(),
    deviationFromBaselineFraction: z.number().nullable(),
    levels: z.object({ warningFraction: z.number(), actionFraction: z.number(), suspendFraction: z.number() }),
    notTraceableBecause: z.array(z.string()),
    slopePerDay: z
      .number()
      .nullable()
      .describe('Of ln(measured over displayed), over the checks of this setting since the last service'),
    actionLevelAt: z.string().nullable().describe('Predicted day on which the action level is met'),
    chartAlarm: z.boolean().describe('The control chart had left its limits with this check'),
  })
  .meta({ id: 'Check' });

export const DriftQuery = z.strictObject({
  wavelengthNm: z
    .string()
    .regex(/^\d{2,5}(\.\d+)?$/, { error: 'must be a wavelength in nm' })
    .optional(),
  handpiece: HandpieceName.optional(),
  asOf: instant.optional(),
});

export const DriftResult = z
  .object({
    deviceId: z.string(),
    charts: z.array(
      z.object({
        wavelengthNm: z.number(),
        spot: z.looseObject({ shape: z.string() }),
        handpiece: z.string().nullable(),
        checks: z.int(),
        standardDeviation: z.number(),
        shewhartLimit: z.number(),
        ewmaLimit: z.number(),
        slopePerDay: z.number().nullable(),
        slopeStandardErrorPerDay: z.number().nullable(),
        actionLevelAt: z.string().nullable(),
        alarm: z.boolean(),
        points: z.array(
          z.object({
            measuredAt: z.string(),
            logRatio: z.number(),
            ewma: z.number(),
            shewhartAlarm: z.boolean(),
            ewmaAlarm: z.boolean(),
          }),
        ),
      }),
    ),
  })
  .meta({ id: 'Drift' });
