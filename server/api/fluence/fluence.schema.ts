import { z } from 'zod';
import { PulseCount, PulseSchema, pulseEndS, RepetitionRateHz, SpotSchema, WavelengthNm } from '../../schemas/beam.js';
import { reproducible } from '../../schemas/calculation.js';
import { id, quantity, whenever } from '../../schemas/numbers.js';

const relative = (what: string) => quantity('', 0, 1, `Relative standard uncertainty (k = 1) of ${what}`).optional();

const delivery = {
  wavelengthNm: WavelengthNm,
  pulse: PulseSchema.optional(),
  repetitionRateHz: RepetitionRateHz.optional(),
  spot: SpotSchema,
  transmissionFraction: quantity('', 0.001, 1, 'Transmission from the device to the skin; 1 when absent').optional(),
  calibrationFactor: quantity('', 0.01, 100, 'Measured over displayed energy; 1 when absent').optional(),
  relativeUncertainties: z
    .strictObject({
      pulseEnergy: relative('the energy (or power)'),
      spotDiameter: relative('the diameter or side of the spot; it counts twice'),
      transmission: relative('the transmission'),
      calibration: relative('the calibration factor'),
    })
    .optional(),
  ...reproducible,
};

type Timing = { pulse?: unknown; repetitionRateHz?: unknown } | null | undefined;

function pulseFitsPeriod(body: Timing): boolean {
  if (typeof body?.repetitionRateHz !== 'number' || body.pulse === undefined) return true;
  const pulse = PulseSchema.safeParse(body.pulse);
  return !pulse.success || pulseEndS(pulse.data) * body.repetitionRateHz <= 1 + 1e-9;
}

const fitsPeriod = { error: 'the pulse is longer than the period 1 / repetitionRateHz', path: ['pulse'], ...whenever };

export const FluenceRequest = z
  .strictObject({
    ...delivery,
    pulseEnergyJ: quantity('J', 1e-12, 1e5, 'Energy of one pulse as displayed').optional(),
    averagePowerW: quantity('W', 1e-9, 1e6, 'Average power as displayed, with repetitionRateHz or exposureTimeS').optional(),
    exposureTimeS: quantity('s', 1e-9, 1e5, 'Duration of a continuous emission').optional(),
    pulseCount: PulseCount.optional(),
    overlapFraction: quantity(
      '',
      0,
      1,
      'Share of the area of the spot that the next pulse covers again; 1, one place, when absent',
    ).optional(),
  })
  .refine((body) => (body?.pulseEnergyJ === undefined) !== (body?.averagePowerW === undefined), {
    error: 'needs exactly one of pulseEnergyJ or averagePowerW',
    path: ['pulseEnergyJ'],
    ...whenever,
  })
  .refine(
    (body) => body?.averagePowerW === undefined || (body.repetitionRateHz === undefined) !== (body.exposureTimeS === undefined),
    {
      error: 'averagePowerW needs exactly one of repetitionRateHz (pulsed) or exposureTimeS (continuous)',
      path: ['averagePowerW'],
      ...whenever,
    },
  )
  .refine((body) => body?.exposureTimeS === undefined || (body.averagePowerW !== undefined && body.pulse === undefined), {
    error: 'belongs to a continuous emission: give averagePowerW, and no pulse',
    path: ['exposureTimeS'],
    ...whenever,
  })
  .refine((body) => body?.exposureTimeS !== undefined || body?.pulse !== undefined, {
    error: 'is needed for pulsed emission',
    path: ['pulse'],
    ...whenever,
  })
  .refine(pulseFitsPeriod, fitsPeriod)
  .meta({
    id: 'FluenceRequest',
    examples: [{ wavelengthNm: 1064, pulseEnergyJ: 0.5, pulse: { durationS: 1e-8 }, spot: { shape: 'circle', diameterMm: 5 } }],
  });

export const FluenceResult = z
  .object({
    fluenceJPerCm2: z.number().describe('Energy over area; of a Gaussian E / (pi w2) with w the 1/e2 radius'),
    peakFluenceJPerCm2: z.number().describe('On the axis; twice the mean for a Gaussian'),
    irradianceWPerCm2: z.number().describe('Greatest within the pulse, over the same area'),
    peakPowerW: z.number(),
    averagePowerW: z.number(),
    dutyCycleFraction: z.number(),
    cumulativeFluenceJPerCm2: z.number().describe('Bookkeeping, not a biological dose'),
    electricFieldVPerM: z.number(),
    interactionRegime: z.enum(['photochemical', 'photothermal', 'photoablative', 'plasma-mediated', 'below-effect']),
    photonEnergyEv: z.number(),
    uncertainty: z.object({
      relativeStandard: z.number(),
      coverageFactor: z.number(),
      lowJPerCm2: z.number(),
      highJPerCm2: z.number(),
      budget: z
        .array(
          z.object({ quantity: z.string(), relativeStandard: z.number(), sensitivity: z.number(), contribution: z.number() }),
        )
        .readonly(),
    }),
  })
  .meta({ id: 'FluenceResult' });

export const SettingsRequest = z
  .strictObject({
    ...delivery,
    fluenceJPerCm2: quantity('J/cm2', 1e-9, 1e5, 'Fluence wanted on the skin, energy over area'),
    deviceId: id.optional(),
    energyMaxJ: quantity('J', 1e-12, 1e5, 'Greatest pulse energy that the device gives').optional(),
  })
  .refine((body) => body?.pulse !== undefined, { error: 'is needed', path: ['pulse'], ...whenever })
  .refine(pulseFitsPeriod, fitsPeriod)
  .meta({ id: 'SettingsRequest' });

export const SettingsResult = z
  .object({
    pulseEnergyJ: z.number().describe('Energy to set, before transmission and calibration'),
    panel: z.object({
      pulseEnergyJ: z.number(),
      fluenceJPerCm2: z.number().describe('What a panel that knows of no loss would show for this spot'),
      averagePowerW: z.number().optional(),
      repetitionRateHz: z.number().optional(),
    }),
    deliverable: z.boolean(),
    reasons: z.array(z.string()),
    lowJPerCm2: z.number().describe('Lower end of the fluence that this setting delivers, k = 2'),
    highJPerCm2: z.number().describe('Upper end of the fluence that this setting delivers, k = 2'),
  })
  .meta({ id: 'SettingsResult' });
