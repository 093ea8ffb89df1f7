import { z } from 'zod';
import { WavelengthNm } from '../../schemas/beam.js';
import { freeText } from '../../schemas/free-text.js';
import { instant, quantity, text, whenever } from '../../schemas/numbers.js';

export const MeterRequest = z
  .strictObject({
    name: text(80, 'Name within the clinic'),
    serial: text(80, 'Serial number of the head'),
    certificate: text(120, 'Number of the calibration certificate and laboratory'),
    calibratedAt: instant.optional().describe('When it was calibrated'),
    calibratedUntil: instant.describe('End of validity of the certificate'),
    wavelengthMinNm: WavelengthNm,
    wavelengthMaxNm: WavelengthNm,
    energyMinJ: quantity('J', 0, 1e5, 'Least energy per pulse of its range'),
    energyMaxJ: quantity('J', 1e-12, 1e5, 'Greatest energy per pulse of its range'),
    repetitionMaxHz: quantity('Hz', 0.001, 1e9, 'Greatest repetition rate').optional(),
    relativeUncertainty: quantity('', 1e-4, 0.5, 'Standard uncertainty of the certificate (k = 1)').optional(),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .refine((meter) => !(meter?.wavelengthMinNm > meter?.wavelengthMaxNm), {
    error: 'must not be below wavelengthMinNm',
    path: ['wavelengthMaxNm'],
    ...whenever,
  })
  .refine((meter) => !(meter?.energyMinJ >= meter?.energyMaxJ), {
    error: 'must be above energyMinJ',
    path: ['energyMaxJ'],
    ...whenever,
  })
  .meta({
    id: 'MeterRequest',
    example: {
      name: 'Thermopile 1',
      serial: 'TP-22',
      certificate: 'C-2025-118',
      calibratedUntil: '2027-01-15T00:00:00Z',
      wavelengthMinNm: 400,
      wavelengthMaxNm: 1100,
      energyMinJ: 0.01,
      energyMaxJ: 30,
      repetitionMaxHz: 5,
      relativeUncertainty: 0.02,
    },
  });

export const MeterItem = z
  .looseObject({ id: z.string(), version: z.int(), recordedAt: z.string(), name: z.string(), calibratedUntil: z.string() })
  .meta({ id: 'Meter' });
