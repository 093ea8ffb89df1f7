import { z } from 'zod';
import { quantity } from './numbers.js';

export const WavelengthNm = quantity('nm', 100, 20_000, 'Vacuum wavelength');
export const SpotDiameterMm = quantity(
  'mm',
  0.01,
  100,
  'Diameter of the spot on the skin: the edge of a flat-top, 1/e2 of a Gaussian',
);
const side = (description: string) => quantity('mm', 0.01, 200, description);

export const SpotSchema = z
  .discriminatedUnion('shape', [
    z.strictObject({ shape: z.literal('circle'), diameterMm: SpotDiameterMm }),
    z.strictObject({ shape: z.literal('square'), widthMm: side('Side of the flat-top square') }),
    z.strictObject({ shape: z.literal('rectangle'), widthMm: side('First side'), heightMm: side('Second side') }),
    z.strictObject({ shape: z.literal('gaussian'), diameterMm: SpotDiameterMm }),
  ])
  .meta({ id: 'Spot', description: 'Cross-section of the beam on the skin' });

export const PulseDurationS = quantity('s', 1e-15, 1000, 'Pulse duration, full width at half maximum');

const SubPulse = z.strictObject({
  startS: quantity('s', 0, 1000, 'Start after the beginning of the pulse'),
  durationS: PulseDurationS,
  energyFraction: quantity('', 1e-9, 1, 'Share of the energy of the pulse; the shares sum to 1'),
});

const Train = z.strictObject({
  subPulses: z
    .array(SubPulse)
    .min(1, { error: 'needs at least one sub-pulse' })
    .max(1000, { error: 'takes at most 1000 sub-pulses' })
    .refine((parts) => Math.abs(parts.reduce((sum, part) => sum + part.energyFraction, 0) - 1) < 1e-6, {
      error: 'energyFraction of the sub-pulses must sum to 1',
    })
    .refine(
      (parts) => {
        const sorted = [...parts].sort((a, b) => a.startS - b.startS);
        return sorted.every(
          (part, i) => i === 0 || part.startS >= (sorted[i - 1]!.startS + sorted[i - 1]!.durationS) * (1 - 1e-12),
        );
      },
      { error: 'sub-pulses must not overlap' },
    ),
});

export const PulseSchema = z.union([z.strictObject({ durationS: PulseDurationS }), Train]).meta({
  id: 'Pulse',
  description: 'One pulse: a duration (full width at half maximum of a rectangular pulse), or sub-pulses that share its energy',
});

export type PulseInput = z.output<typeof PulseSchema>;

/** From the start of the first to the end of the last emission. */
export function pulseEndS(pulse: PulseInput): number {
  return 'durationS' in pulse ? pulse.durationS : Math.max(...pulse.subPulses.map((part) => part.startS + part.durationS));
}

export const RepetitionRateHz = quantity('Hz', 0.001, 1e9, 'Pulses per second on the same place');
export const PulseCount = z
  .int({ error: 'must be a whole number from 1 to 10000' })
  .min(1, { error: 'must be a whole number from 1 to 10000' })
  .max(10_000, { error: 'must be a whole number from 1 to 10000' })
  .describe('Pulses on the same place');

export const CoolingSchema = z
  .strictObject({
    kind: z.enum(['none', 'contact', 'cryogen-spray', 'chilled-air']),
    temperatureC: quantity('C', -200, 60, 'Temperature of the cooling medium').optional(),
    heatTransferWPerM2K: quantity('W/(m2 K)', 0, 1e6, 'Heat transfer coefficient at the surface').optional(),
    preS: quantity('s', 0, 600, 'Cooling before the pulse').optional(),
    postS: quantity('s', 0, 600, 'Cooling after the pulse').optional(),
    delayS: quantity('s', 0, 600, 'From the end of the cryogen spurt to the pulse').optional(),
    spurtS: quantity('s', 0, 10, 'Duration of the cryogen spurt').optional(),
  })
  .meta({ id: 'Cooling', description: 'Surface cooling around the pulse' });
