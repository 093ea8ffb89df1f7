import { describe, expect, it } from 'vitest';
import { Remarks } from '../../../domain/quantities/caution.js';
import { makeHeatGrid } from '../../../domain/thermal/heat-grid.js';
import { prepareLayeredHeat } from '../../../domain/thermal/layered-heat.js';
import { type Cooling, cautionIfFreezing, coolingPhases } from '../../../domain/thermal/surface-cooling.js';
import { dermis, epidermis, figures } from './media.js';

const phasesOf = (cooling: Cooling | undefined, endS = 0.01, remarks = new Remarks()) =>
  coolingPhases(cooling, endS, figures, remarks);

describe('cooling phases', () => {
  it.each([undefined, { kind: 'none' } as const])('without cooling are still air throughout (%#)', (cooling) => {
    expect(phasesOf(cooling)).toEqual([{ fromS: 0, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K: 10, temperatureC: 23 }]);
  });

  it('of contact hold from before the pulse until after its end', () => {
    const phases = phasesOf({ kind: 'contact', temperatureC: 4, preS: 1, postS: 0.3 });
    expect(phases[0]).toEqual({ fromS: -1, toS: 0.31, heatTransferWPerM2K: 3000, temperatureC: 4 });
    expect(phases[1]).toMatchObject({ fromS: 0.31, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K: 10 });
  });

  it('of a spray begin with the spurt, run through the delay, and last until the film has gone', () => {
    const phases = phasesOf({ kind: 'cryogen-spray', spurtS: 0.03, delayS: 0.01, postS: 0.1 });
    expect(phases[0]!.fromS).toBeCloseTo(-0.04, 12);
    expect(phases[0]!.toS).toBeCloseTo(0.09, 12);
    expect(phases[0]!.temperatureC).toBe(-26);
  });

  it('follow each other without gap from before time 0, whatever the times', () => {
    for (const cooling of [
      { kind: 'cryogen-spray', spurtS: 0.01, delayS: 0.5, postS: 0.05 },
      { kind: 'cryogen-spray', spurtS: 0, delayS: 0 },
      { kind: 'chilled-air', preS: 0, postS: 0 },
    ] as const) {
      const phases = phasesOf(cooling);
      expect(phases[0]!.fromS).toBeLessThanOrEqual(0);
      phases.forEach((phase, i) => {
        if (i > 0) expect(phase.fromS).toBe(phases[i - 1]!.toS);
        expect(phase.toS).toBeGreaterThanOrEqual(phase.fromS);
      });
      expect(phases[phases.length - 1]!.toS).toBe(Number.POSITIVE_INFINITY);
    }
  });

  it('repeat the spurt before each pulse of a train, with air between', () => {
    const spray: Cooling = { kind: 'cryogen-spray', spurtS: 0.03, delayS: 0.02, postS: 0.1 };
    const phases = coolingPhases(spray, 2.01, figures, new Remarks(), { repetitionRateHz: 1, pulseCount: 3 });
    expect(phases.map((phase) => phase.temperatureC)).toEqual([-26, 23, -26, 23, -26, 23]);
    expect(phases[2]!.fromS).toBeCloseTo(0.95, 12);
    phases.forEach((phase, i) => {
      if (i > 0) expect(phase.fromS).toBe(phases[i - 1]!.toS);
    });
  });

  it('join spurts that come before the film of the last has gone, and give long trains one spurt with a caution', () => {
    const spray: Cooling = { kind: 'cryogen-spray', spurtS: 0.03, delayS: 0.02, postS: 0.1 };
    expect(coolingPhases(spray, 0.5, figures, new Remarks(), { repetitionRateHz: 10, pulseCount: 5 })).toHaveLength(2);
    const remarks = new Remarks();
    expect(coolingPhases(spray, 100, figures, remarks, { repetitionRateHz: 1, pulseCount: 100 })).toHaveLength(2);
    expect(remarks.cautions.map((caution) => caution.code)).toEqual(['one-spurt', 'from-memory']);
  });

  it('name every default they fill in, and none that was given', () => {
    const remarks = new Remarks();
    phasesOf({ kind: 'contact' }, 0.01, remarks);
    const names = remarks.assumptions.map((assumption) => assumption.name);
    expect(names).toEqual(
      expect.arrayContaining(['cooling.heatTransferWPerM2K', 'cooling.temperatureC', 'cooling.preS', 'cooling.postS']),
    );
    const given = new Remarks();
    phasesOf({ kind: 'contact', temperatureC: 4, heatTransferWPerM2K: 1000, preS: 1, postS: 1 }, 0.01, given);
    expect(given.assumptions.filter((assumption) => assumption.name.startsWith('cooling.'))).toEqual([]);
  });

  it('refuse times and coefficients that cannot be', () => {
    expect(() => phasesOf({ kind: 'contact', preS: -1 })).toThrowError(expect.objectContaining({ code: 'out-of-range' }));
    expect(() => phasesOf({ kind: 'contact', heatTransferWPerM2K: Number.NaN })).toThrowError(
      expect.objectContaining({ code: 'out-of-range' }),
    );
    expect(() => phasesOf({ kind: 'contact', temperatureC: -300 })).toThrowError(
      expect.objectContaining({ code: 'out-of-range' }),
    );
    const empty = { ...figures, cooling: new Map() };
    expect(() => coolingPhases({ kind: 'contact' }, 1, empty, new Remarks())).toThrowError(
      expect.objectContaining({ code: 'unknown-reference' }),
    );
  });
});

describe('[Anvari et al 1998] measured surface temperatures of cooled skin', () => {
  const grid = makeHeatGrid([
    { thicknessUm: 80, material: epidermis },
    { thicknessUm: 2000, material: dermis },
  ]);
  const rest = { surfaceC: 30, coreC: 37, heatTransferWPerM2K: 10, airC: 23 };
  const coldest = (cooling: Cooling) =>
    prepareLayeredHeat({
      grid,
      phases: phasesOf(cooling, 0),
      emission: [{ startS: 0, endS: 1, energyFraction: 1 }],
      timesS: [0],
      placesUm: [0],
      rest,
    });

  it('a sapphire window at 6 to 12 C brings 30 C to 14 to 19 C within about 1 s (2 C allowed for contact and window)', () => {
    const surface = [6, 12].map((temperatureC) => coldest({ kind: 'contact', temperatureC, preS: 1 }).baselineC[0]!);
    expect(surface[0]).toBeGreaterThan(8);
    expect(surface[1]).toBeLessThan(21);
  });

  it('spurts of 20 to 100 ms bring it to 5 to -9 C (within 5 C)', () => {
    const surface = [0.02, 0.1].map((spurtS) => coldest({ kind: 'cryogen-spray', spurtS, delayS: 0, postS: 0 }).coldestSurfaceC);
    expect(surface[0]).toBeLessThan(10);
    expect(surface[0]).toBeGreaterThan(0);
    expect(surface[1]).toBeLessThan(-4);
    expect(surface[1]).toBeGreaterThan(-14);
  });
});

describe('freezing', () => {
  it('is cautioned below 0 C alone', () => {
    const remarks = new Remarks();
    cautionIfFreezing(0.1, remarks);
    expect(remarks.cautions).toEqual([]);
    cautionIfFreezing(-5, remarks);
    expect(remarks.cautions[0]!.code).toBe('skin-below-freezing');
  });
});
