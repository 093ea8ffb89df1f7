import { describe, expect, it } from 'vitest';
import { type HeldHeater, thermalDamageTimeS } from '../../../domain/thermal/thermal-damage-time.js';
import { erfc } from './closed-forms.js';

const held: HeldHeater = {
  geometry: 'plane',
  heaterRadiusUm: 50,
  targetRadiusUm: 150,
  diffusivityMm2PerS: 0.11,
  heaterC: 100,
  damageC: 60,
  startC: 37,
};

describe('thermal damage time', () => {
  it('of a plane meets the closed form of a surface held at one temperature', () => {
    const timeS = thermalDamageTimeS(held)!;
    expect(erfc(0.1 / (2 * Math.sqrt(0.11 * timeS)))).toBeCloseTo(23 / 63, 3);
  });

  it('of a sphere meets (a / r) erfc((r - a) / (2 root(kappa t)))', () => {
    const timeS = thermalDamageTimeS({ ...held, geometry: 'sphere', targetRadiusUm: 100, damageC: 55 })!;
    expect(0.5 * erfc(0.05 / (2 * Math.sqrt(0.11 * timeS)))).toBeCloseTo(18 / 63, 3);
  });

  it('does not exist where the steady state around a sphere stays too cold', () => {
    expect(thermalDamageTimeS({ ...held, geometry: 'sphere', targetRadiusUm: 500 })).toBeNull();
  });

  it('grows with distance and falls with a hotter heater, and is 0 at the heater itself', () => {
    const at = (targetRadiusUm: number, heaterC = 100) =>
      thermalDamageTimeS({ ...held, geometry: 'cylinder', targetRadiusUm, heaterC })!;
    expect(at(200)).toBeGreaterThan(at(100));
    expect(at(200, 150)).toBeLessThan(at(200));
    expect(at(50)).toBe(0);
  });

  it('refuses temperatures and radii out of order', () => {
    expect(() => thermalDamageTimeS({ ...held, damageC: 120 })).toThrowError(expect.objectContaining({ code: 'out-of-range' }));
    expect(() => thermalDamageTimeS({ ...held, targetRadiusUm: 20 })).toThrowError(
      expect.objectContaining({ code: 'out-of-range' }),
    );
  });
});
