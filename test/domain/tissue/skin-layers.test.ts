import { describe, expect, it } from 'vitest';
import { Remarks } from '../../../domain/quantities/caution.js';
import { absorptionOf } from '../../../domain/spectra/chromophore.js';
import { anisotropyOf, reducedScatteringPerCm } from '../../../domain/tissue/scattering.js';
import { resolveSkin, type SkinDescription } from '../../../domain/tissue/skin.js';
import { skinBloodAbsorptionPerCm, skinLayers } from '../../../domain/tissue/skin-layers.js';
import { flatteningFactor } from '../../../domain/tissue/vessel-correction.js';
import { referenceData } from '../../support/ask.js';

const reference = referenceData();

function layersOf(description: SkinDescription, nm: number, remarks = new Remarks()) {
  const skin = resolveSkin(description, reference.skin, remarks);
  return { skin, layers: skinLayers(skin, nm, reference, remarks), codes: remarks.cautions.map(({ code }) => code), remarks };
}

describe('layers of skin', () => {
  it('absorb as the volume-weighted sum of what they hold, blood flattened in its vessels', () => {
    const { skin, layers } = layersOf({ melanosomeFraction: 0.03, bloodFraction: 0.02 }, 577);
    const at = (id: string) => absorptionOf(reference.chromophores, id, 577);
    const [epidermis, dermis] = layers;
    const background = at('bloodless-skin');
    const water = at('water');
    expect(epidermis!.absorptionPerCm).toBeCloseTo(0.03 * at('melanosome') + 0.97 * (background + 0.5 * water), 9);
    const blood = skinBloodAbsorptionPerCm(577, skin, reference);
    const flat = blood * flatteningFactor(blood, skin.backgroundVesselRadiusUm);
    expect(dermis!.absorptionPerCm).toBeCloseTo(0.02 * flat + 0.98 * (background + 0.65 * water), 9);
    expect(flat).toBeLessThan(blood);
  });

  it('scatter by the published law: mu_s (1 - g) is the reduced scattering', () => {
    const { layers } = layersOf({ phototype: 'III' }, 755);
    for (const layer of layers) {
      const law = reference.skin.scattering[layer.name as 'epidermis' | 'dermis' | 'fat'];
      expect(layer.scatteringPerCm * (1 - layer.anisotropy)).toBeCloseTo(reducedScatteringPerCm(law, 755), 9);
      expect(layer.anisotropy).toBeCloseTo(0.62 + 0.00029 * 755, 12); // VanGemert1989
    }
  });

  it('work everywhere from 350 to 12 000 nm: finite, positive, and water-dominated beyond 2700 nm', () => {
    for (let nm = 350; nm <= 12_000; nm += nm < 2500 ? 5 : 50) {
      const { layers } = layersOf({ phototype: 'IV' }, nm);
      for (const { absorptionPerCm, scatteringPerCm, anisotropy } of layers) {
        expect(absorptionPerCm).toBeGreaterThan(0);
        expect(scatteringPerCm).toBeGreaterThan(0);
        expect(anisotropy).toBeLessThanOrEqual(0.91);
      }
      if (nm > 2700) {
        const water = absorptionOf(reference.chromophores, 'water', nm);
        expect(layers[0]!.absorptionPerCm / (0.5 * water)).toBeGreaterThan(0.95);
        expect(layers[0]!.absorptionPerCm / (0.5 * water)).toBeLessThan(1.05);
      }
    }
  });

  it('say what is assumed beyond the ranges of their laws', () => {
    expect(layersOf({ phototype: 'II' }, 1064).codes).toContain('blood-beyond-tables');
    const far = layersOf({ phototype: 'II' }, 2940).codes;
    expect(far).toEqual(expect.arrayContaining(['extrapolated-scattering', 'extrapolated-spectrum', 'lipid-held']));
    expect(layersOf({ phototype: 'II' }, 1726).codes).toContain('sparse-spectrum');
    const near = layersOf({ phototype: 'II' }, 800).codes;
    for (const code of ['extrapolated-scattering', 'extrapolated-spectrum', 'blood-beyond-tables'])
      expect(near).not.toContain(code);
    const { assumptions } = layersOf({ phototype: 'II' }, 800).remarks;
    expect(assumptions.map(({ name }) => name)).toEqual(
      expect.arrayContaining(['skin.anisotropy', 'skin.epidermis.refractiveIndex', 'skin.fat.lipidFraction']),
    );
  });

  it.each([200, 349, 12_001, Number.NaN])('refuse %d nm', (nm) => {
    expect(() => layersOf({ phototype: 'II' }, nm)).toThrow(/from 350 to 12000 nm, outside give explicit layers/);
  });

  it('absorb more in the epidermis the darker the skin, and no more below it', () => {
    const [light, dark] = [layersOf({ phototype: 'I' }, 694).layers, layersOf({ phototype: 'VI' }, 694).layers];
    expect(dark[0]!.absorptionPerCm).toBeGreaterThan(5 * light[0]!.absorptionPerCm);
    expect(dark[1]!.absorptionPerCm).toBe(light[1]!.absorptionPerCm);
  });
});

describe('flattening by vessels', () => {
  it('[Verkruysse1997] is (1 - exp(-2 mu R)) / (2 mu R): 0.4323 for 2 mu R = 2', () => {
    expect(flatteningFactor(100, 100)).toBeCloseTo((1 - Math.exp(-2)) / 2, 12);
  });

  it('is 1 for thin or clear vessels without loss of digits, and falls as 1 / (2 mu R) for opaque ones', () => {
    expect(flatteningFactor(0, 50)).toBe(1);
    expect(flatteningFactor(50, 0)).toBe(1);
    expect(flatteningFactor(1e-3, 1)).toBeCloseTo(1 - 1e-7, 12);
    expect(flatteningFactor(1e4, 1000) * 2e3).toBeCloseTo(1, 9);
  });
});

describe('anisotropy', () => {
  it('stops at its ceiling', () => {
    expect(anisotropyOf(reference.skin.anisotropy, 2000)).toBe(reference.skin.anisotropy.ceiling);
  });
});
