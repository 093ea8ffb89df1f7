import { z } from 'zod';
import { instant, quantity, text, whenever } from './numbers.js';

export const LayerSchema = z
  .strictObject({
    name: text(40, 'Name of the layer').optional(),
    thicknessUm: quantity('um', 0.01, 1e6, 'Thickness; the last layer may be as thick as one likes'),
    absorptionPerCm: quantity('1/cm', 0, 1e6, 'Absorption coefficient, natural base'),
    scatteringPerCm: quantity('1/cm', 0, 1e6, 'Scattering coefficient (not reduced), natural base'),
    anisotropy: quantity('', -0.99, 0.999, 'Mean cosine of the Henyey-Greenstein phase function'),
    refractiveIndex: quantity('', 1, 2, 'Refractive index'),
  })
  .meta({ id: 'Layer', description: 'One homogeneous layer, topmost first in a stack' });

const fields = {
  phototype: z.enum(['I', 'II', 'III', 'IV', 'V', 'VI'], { error: 'must be one of I, II, III, IV, V, VI' }),
  itaDegrees: quantity('degrees', -90, 90, 'Individual typology angle, atan((L* - 50) / b*)'),
  lightnessL: quantity('', 0, 100, 'CIE L*, with yellownessB'),
  yellownessB: quantity('', 0.1, 60, 'CIE b*, with lightnessL'),
  melanosomeFraction: quantity('', 0, 0.5, 'Volume fraction of melanosomes in the epidermis'),
  measuredAt: instant.describe('When pigmentation was measured'),
  epidermisThicknessUm: quantity('um', 20, 1000, 'Thickness of the epidermis'),
  bloodFraction: quantity('', 0, 0.5, 'Volume fraction of blood in the dermis'),
  oxygenSaturationFraction: quantity('', 0, 1, 'Oxygen saturation of that blood'),
  hematocritFraction: quantity('', 0.1, 0.75, 'Hematocrit of that blood'),
  waterFraction: quantity('', 0, 1, 'Volume fraction of water in epidermis and dermis'),
  site: text(80, 'Body site'),
  tan: z.enum(['none', 'recent', 'unknown'], { error: 'must be one of none, recent, unknown' }),
};

const pigmentForms = 'skin needs exactly one of phototype, itaDegrees, lightnessL with yellownessB, or melanosomeFraction';

interface PigmentFields {
  readonly phototype?: unknown;
  readonly itaDegrees?: unknown;
  readonly lightnessL?: unknown;
  readonly yellownessB?: unknown;
  readonly melanosomeFraction?: unknown;
}

export function hasOnePigmentForm(skin: PigmentFields | null | undefined): boolean {
  if (skin === null || typeof skin !== 'object') return true; // told by another fault
  const color = skin.lightnessL !== undefined || skin.yellownessB !== undefined;
  if (color && (skin.lightnessL === undefined || skin.yellownessB === undefined)) return false;
  return (
    [skin.phototype !== undefined, skin.itaDegrees !== undefined, color, skin.melanosomeFraction !== undefined].filter(Boolean)
      .length === 1
  );
}

/** Skin by its pigmentation, for everything that needs tissue. */
export const SkinSchema = z
  .strictObject(fields)
  .partial()
  .refine(hasOnePigmentForm, { error: pigmentForms, ...whenever })
  .meta({
    id: 'Skin',
    description: 'Skin by exactly one measure of pigmentation (phototype is weak evidence) and what else is known of it',
  });

/** Skin, or explicit optical layers where only optics matter. */
export const OpticalSkinSchema = z
  .strictObject({
    ...fields,
    layers: z.array(LayerSchema).min(1, { error: 'needs at least one layer' }).max(20, { error: 'takes at most 20 layers' }),
  })
  .partial()
  .refine((skin) => (skin?.layers === undefined ? hasOnePigmentForm(skin) : Object.keys(skin).length === 1), {
    error: `${pigmentForms}; or layers alone`,
    ...whenever,
  })
  .meta({ id: 'OpticalSkin', description: 'Skin by pigmentation, or explicit layers alone' });

/** The scalar fields of the skin as they stand in a body; queries make their own of them. */
export const skinFields = fields;
