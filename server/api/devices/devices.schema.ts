import { z } from 'zod';
import { usualLevels } from '../../../domain/dosimetry/drift.js';
import { DeviceLineSchema, HandpieceName, HandpieceSchema } from '../../schemas/device.js';
import { freeText } from '../../schemas/free-text.js';
import { count, quantity, text, whenever } from '../../schemas/numbers.js';

const level = (description: string) => quantity('', 0.001, 1, description);

/** Levels of constancy checks, kept with each result. */
export const LevelsSchema = z
  .strictObject({
    warningFraction: level('Beyond this: look into it'),
    actionFraction: level('Beyond this: act before further use'),
    suspendFraction: level('Beyond this: do not use'),
  })
  .refine(
    (levels) => !levels || (levels.warningFraction <= levels.actionFraction && levels.actionFraction <= levels.suspendFraction),
    {
      error: 'must ascend from warning to suspend',
      ...whenever,
    },
  )
  .meta({ id: 'ConstancyLevels', example: usualLevels });

export const DeviceRequest = z
  .strictObject({
    name: text(80, 'Name within the clinic'),
    serial: text(80, 'Serial number'),
    medium: text(80, 'Laser medium'),
    lines: z.array(DeviceLineSchema).min(1, { error: 'needs at least one line' }).max(50, { error: 'takes at most 50 lines' }),
    handpieces: z
      .array(z.union([HandpieceName.transform((name) => ({ name })), HandpieceSchema]))
      .max(50, { error: 'takes at most 50 handpieces' })
      .optional(),
    beamProfile: text(80, 'flat-top, gaussian, or what was measured').optional(),
    delivery: text(80, 'fiber, articulated arm, scanner, ...').optional(),
    outputToleranceFraction: quantity('', 0.001, 0.999, 'Outer limit of delivered over set; 0.2 when absent').optional(),
    calibrationIntervalDays: count(1, 3650, 'Days that a calibration is valid; 365 when absent').optional(),
    constancyLevels: LevelsSchema.optional(),
    inService: z
      .boolean({ error: 'must be true or false' })
      .optional()
      .describe('False: not used for planning; true when absent'),
    laserClass: text(10, 'Laser class').optional(),
    location: freeText(80, 'Where it stands').optional(),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .meta({
    id: 'DeviceRequest',
    example: {
      name: 'Dye laser, room 2',
      serial: 'DL-0147',
      medium: 'pulsed dye',
      lines: [
        {
          wavelengthNm: 595,
          pulseMinS: 0.00045,
          pulseMaxS: 0.04,
          energyMaxJ: 8,
          repetitionMaxHz: 1.5,
          spots: [
            { shape: 'circle', diameterMm: 7 },
            { shape: 'circle', diameterMm: 10 },
          ],
        },
      ],
      beamProfile: 'flat-top',
      delivery: 'fiber',
      outputToleranceFraction: 0.2,
    },
  });

export const DeviceItem = z
  .looseObject({
    id: z.string(),
    version: z.int(),
    recordedAt: z.string(),
    name: z.string(),
    serial: z.string(),
    medium: z.string(),
    lines: z.array(z.looseObject({})),
    handpieces: z.array(z.looseObject({ name: z.string() })),
    outputToleranceFraction: z.number(),
    calibrationIntervalDays: z.int(),
    constancyLevels: z.object({ warningFraction: z.number(), actionFraction: z.number(), suspendFraction: z.number() }),
    inService: z.boolean(),
  })
  .meta({ id: 'Device' });
