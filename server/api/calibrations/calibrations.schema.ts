import { z } from 'zod';
import { PulseSchema, RepetitionRateHz, SpotSchema, WavelengthNm } from '../../schemas/beam.js';
import { HandpieceName, PanelSettingSchema } from '../../schemas/device.js';
import { freeText } from '../../schemas/free-text.js';
import { id, instant, quantity, text, whenever } from '../../schemas/numbers.js';

export const CalibrationRequest = z
  .strictObject({
    measuredAt: instant.describe('When it was measured'),
    wavelengthNm: WavelengthNm,
    spot: SpotSchema,
    pulse: PulseSchema.optional().describe('The pulse it was measured with; absent: it holds for any'),
    handpiece: HandpieceName.optional(),
    repetitionRateHz: RepetitionRateHz.optional(),
    set: PanelSettingSchema,
    measured: z
      .strictObject({
        pulseEnergyJ: quantity('J', 0, 1e5, 'Mean measured energy per pulse at the skin'),
        relativeUncertainty: quantity('', 0, 1, 'Its standard uncertainty (k = 1)'),
      })
      .describe('What the meter read'),
    meterId: id.optional().describe('Meter; a reading outside its range is kept as not traceable and is not used'),
    by: text(80, 'Who measured, as a staff code'),
    validUntil: instant.optional().describe('End of validity; by the interval of the device when absent'),
    supersedes: id.optional().describe('Calibration of this device that this one corrects; both stay readable'),
    reason: freeText(500, 'Why the earlier one was wrong').optional(),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .refine((calibration) => (calibration?.supersedes === undefined) === (calibration?.reason === undefined), {
    error: 'is needed with supersedes, and only then',
    path: ['reason'],
    ...whenever,
  })
  .refine(({ measuredAt, validUntil }) => validUntil === undefined || Date.parse(validUntil) > Date.parse(measuredAt), {
    error: 'must be after measuredAt',
    path: ['validUntil'],
  })
  .meta({
    id: 'CalibrationRequest',
    example: {
      measuredAt: '2026-02-02T08:10:00+01:00',
      wavelengthNm: 595,
      spot: { shape: 'circle', diameterMm: 7 },
      pulse: { durationS: 0.0015 },
      set: { fluenceJPerCm2: 8 },
      measured: { pulseEnergyJ: 2.9, relativeUncertainty: 0.03 },
      by: 'LP-1',
    },
  });

export const CalibrationItem = z
  .looseObject({
    id: z.string(),
    deviceId: z.string(),
    recordedAt: z.string(),
    measuredAt: z.string(),
    validUntil: z.string(),
    factor: z.number().describe('Measured over set'),
    deviationFraction: z.number().describe('Measured over set, less 1'),
    inTolerance: z.boolean().describe('Within the output tolerance of the device, edge included'),
    toleranceFraction: z.number(),
    traceability: z.enum(['traceable', 'not-traceable', 'no-meter-named']),
    notTraceableBecause: z.array(z.string()),
    status: z
      .enum(['in-force', 'lapsed', 'closed-by-service', 'superseded', 'not-traceable'])
      .describe('At asOf; in-force gives way, setting by setting, to later ones'),
    supersededBy: z.string().nullable(),
  })
  .meta({ id: 'Calibration' });
