import { z } from 'zod';
import { SpotSchema, WavelengthNm } from './beam.js';
import { quantity, text, whenever } from './numbers.js';

const one = (value: { pulseEnergyJ?: unknown; fluenceJPerCm2?: unknown } | null | undefined) =>
  value === null || typeof value !== 'object' || value.pulseEnergyJ !== undefined || value.fluenceJPerCm2 !== undefined;

/** What stands on the panel. Both figures may be given; they are then compared. */
export const PanelSettingSchema = z
  .strictObject({
    pulseEnergyJ: quantity('J', 0, 1e6, 'Energy per pulse that the panel shows').optional(),
    fluenceJPerCm2: quantity('J/cm2', 0, 1e8, 'Fluence that the panel shows').optional(),
  })
  .refine(one, { error: 'needs pulseEnergyJ or fluenceJPerCm2', ...whenever })
  .meta({ id: 'PanelSetting', description: 'What the panel was set to: energy per pulse, fluence, or both' });

export const DeviceLineSchema = z
  .strictObject({
    wavelengthNm: WavelengthNm,
    pulseMinS: quantity('s', 1e-15, 1000, 'Shortest pulse'),
    pulseMaxS: quantity('s', 1e-15, 1000, 'Longest pulse'),
    energyMaxJ: quantity('J', 1e-9, 1e5, 'Greatest energy per pulse').optional(),
    fluenceMaxJPerCm2: quantity('J/cm2', 1e-9, 1e5, 'Greatest fluence').optional(),
    repetitionMaxHz: quantity('Hz', 0.001, 1e9, 'Greatest repetition rate'),
    spots: z.array(SpotSchema).min(1, { error: 'needs at least one spot' }).max(50, { error: 'takes at most 50 spots' }),
  })
  .refine((line) => !line || line.energyMaxJ !== undefined || line.fluenceMaxJPerCm2 !== undefined, {
    error: 'needs energyMaxJ or fluenceMaxJPerCm2',
    ...whenever,
  })
  .refine((line) => !(line?.pulseMinS > line?.pulseMaxS), {
    error: 'must not be below pulseMinS',
    path: ['pulseMaxS'],
    ...whenever,
  })
  .meta({ id: 'DeviceLine', description: 'One wavelength that the device emits, with the limits of its panel' });

export const HandpieceSchema = z
  .strictObject({ name: text(80, 'Name as on the record'), spots: z.array(SpotSchema).min(1).max(50).optional() })
  .meta({ id: 'Handpiece', description: 'A handpiece with its own spots where it has fewer than the line' });

export const HandpieceName = text(80, 'Name of the handpiece');
