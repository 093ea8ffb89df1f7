import { describe, expect, it } from 'vitest';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { makeHeatGrid } from '../../../domain/thermal/heat-grid.js';
import { HeatModes } from '../../../domain/thermal/heat-modes.js';
import { type LayeredHeatRequest, prepareLayeredHeat } from '../../../domain/thermal/layered-heat.js';
import type { SkinAtRest, SurfacePhase } from '../../../domain/thermal/surface-cooling.js';
import { convectiveHalfSpace, erfc, exponentialLongPulse, exponentialShortPulse } from './closed-forms.js';
import { alpha, conductivity, dermis, epidermis, fat, heatCapacity, water } from './media.js';

const cold: SkinAtRest = { surfaceC: 0, coreC: 0, heatTransferWPerM2K: 0, airC: 0 };
const always = (heatTransferWPerM2K: number, temperatureC: number): SurfacePhase[] => [
  { fromS: 0, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K, temperatureC },
];
const homogeneous = makeHeatGrid([{ thicknessUm: 1, material: water }], { longestS: 10 });
const skin = makeHeatGrid([
  { thicknessUm: 70, material: epidermis },
  { thicknessUm: 1500, material: dermis },
  { thicknessUm: 6000, material: fat },
]);
const skinModes = new HeatModes();

function solve(request: Partial<LayeredHeatRequest> & Pick<LayeredHeatRequest, 'timesS' | 'placesUm'>) {
  return prepareLayeredHeat({
    grid: homogeneous,
    phases: always(0, 0),
    emission: emissionIntervals({ durationS: 1e-12 }),
    rest: cold,
    ...request,
  });
}

const exponential = (perM: number, { facesUm, centersUm } = homogeneous) =>
  centersUm.map((_, i) => {
    const [top, bottom] = [facesUm[i]! * 1e-6, facesUm[i + 1]! * 1e-6];
    return (Math.exp(-perM * top) * -Math.expm1(-perM * (bottom - top))) / (bottom - top) / 100;
  });

const timesS = [1e-3, 1e-2, 0.1, 1, 5];
const placesUm = [0, 50, 200, 1000];

/** The grid in everyday use (2 um, growth 8 %) against closed forms: within 0.5 % of the largest value. */
describe('[Carslaw and Jaeger 1959] half-space on the everyday grid', () => {
  const compare = (values: ArrayLike<number>, expected: (depthM: number, timeS: number) => number, scale = 1) => {
    placesUm.forEach((placeUm, place) => {
      timesS.forEach((timeS, time) => {
        const difference = values[place * timesS.length + time]! - expected(placeUm * 1e-6, timeS);
        expect(Math.abs(difference), `${placeUm} um at ${timeS} s`).toBeLessThan(0.005 * scale);
      });
    });
  };

  it('with a fixed surface temperature', () => {
    const { baselineC } = solve({ phases: always(1e9, 1), timesS, placesUm });
    compare(baselineC, (z, t) => erfc(z / (2 * Math.sqrt(alpha * t))));
  });

  it.each([100, 1000, 10000])('with convection through %d W/m2K', (h) => {
    const { baselineC } = solve({ phases: always(h, 1), timesS, placesUm });
    compare(baselineC, (z, t) => convectiveHalfSpace(z, t, alpha, h / conductivity));
  });

  it('after a short pulse absorbed exponentially', () => {
    const perM = 2e4;
    const rises = solve({ timesS, placesUm: [0] }).responseK(exponential(perM));
    const first = (perM * 1e4) / heatCapacity;
    timesS.forEach((t, i) => {
      expect(Math.abs(rises[i]! / (first * exponentialShortPulse(perM, t, alpha)) - 1)).toBeLessThan(0.005);
    });
  });

  it.each(timesS)('at the end of a pulse of %d s absorbed exponentially', (durationS) => {
    const perM = 2e4;
    const emission = emissionIntervals({ durationS });
    const rise = solve({ emission, timesS: [durationS], placesUm: [0] }).responseK(exponential(perM))[0]!;
    expect(Math.abs(rise / exponentialLongPulse(1e4 / durationS, perM, durationS, alpha, conductivity) - 1)).toBeLessThan(0.005);
  });
});

describe('conduction in layered skin', () => {
  it('conserves energy under an insulated surface', () => {
    const centers = [...skin.centersUm];
    const source = skin.centersUm.map((z) => 20 * Math.exp(-z / 300));
    const heat = prepareLayeredHeat({
      grid: skin,
      phases: always(0, 0),
      emission: emissionIntervals({ durationS: 0.01 }),
      timesS: [0.005, 0.01, 1, 10],
      placesUm: centers,
    });
    const rises = heat.responseK(source);
    const absorbed = source.reduce(
      (sum, perCm, i) => sum + perCm * 100 * 1e4 * (skin.facesUm[i + 1]! - skin.facesUm[i]!) * 1e-6,
      0,
    );
    [0.5, 1, 1, 1].forEach((share, time) => {
      const stored = centers.reduce((sum, _, cell) => sum + skin.capacityJPerM2K[cell]! * rises[cell * 4 + time]!, 0);
      expect(stored / (share * absorbed)).toBeCloseTo(1, 8);
    });
  });

  const phases: SurfacePhase[] = [
    { fromS: -0.4, toS: -0.02, heatTransferWPerM2K: 5000, temperatureC: -26 },
    { fromS: -0.02, toS: 0.015, heatTransferWPerM2K: 800, temperatureC: -20 },
    { fromS: 0.015, toS: 0.2, heatTransferWPerM2K: 3000, temperatureC: 4 },
    { fromS: 0.2, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K: 10, temperatureC: 23 },
  ];

  it('gives the same by the adjoint as by stepping forward in time', () => {
    const source = skin.centersUm.map((z) => (z < 70 ? 20 : 5 * Math.exp(-z / 500)));
    const emission = emissionIntervals({ durationS: 0.02 }, { repetitionRateHz: 10, pulseCount: 2 });
    const sampleS = [0.01, 0.02, 0.1, 0.12, 0.3, 1];
    const places = [skin.centersUm[0]!, skin.centersUm[20]!, skin.centersUm[45]!];
    const rises = prepareLayeredHeat({ grid: skin, phases, emission, timesS: sampleS, placesUm: places }).responseK(source);
    const forward = steppedRise(source, emission, sampleS, 2e-4);
    [0, 20, 45].forEach((cell, place) => {
      sampleS.forEach((_, time) => {
        expect(rises[place * sampleS.length + time]! / forward[time]![cell]!).toBeCloseTo(1, 3);
      });
    });
  });

  // Crank-Nicolson with small steps, written independently of the modes.
  function steppedRise(source: Float64Array, emission: ReturnType<typeof emissionIntervals>, samplesS: number[], stepS: number) {
    const size = skin.centersUm.length;
    let state = new Float64Array(size);
    const results: Float64Array[] = [];
    const lastS = samplesS[samplesS.length - 1]!;
    for (let step = 0, next = 0; next < samplesS.length && step * stepS <= lastS + stepS; step++) {
      const middleS = (step + 0.5) * stepS;
      const h = phases.find((phase) => middleS < phase.toS)!.heatTransferWPerM2K;
      const exchange = 1 / (1 / h + 1 / skin.halfConductanceWPerM2K[0]!);
      const power = emission.find((part) => middleS > part.startS && middleS < part.endS);
      const flux = power ? (power.energyFraction / (power.endS - power.startS)) * 1e6 : 0;
      const above = (i: number) => (i === 0 ? exchange : skin.conductanceWPerM2K[i - 1]!);
      const below = (i: number) => (i === size - 1 ? 0 : skin.conductanceWPerM2K[i]!);
      const lower = new Float64Array(size);
      const right = new Float64Array(size);
      for (let i = 0; i < size; i++) {
        const c = skin.capacityJPerM2K[i]! / stepS;
        const gain = above(i) * ((i === 0 ? 0 : state[i - 1]!) - state[i]!) + below(i) * ((state[i + 1] ?? 0) - state[i]!);
        right[i] = c * state[i]! + 0.5 * gain + flux * source[i]! * (skin.facesUm[i + 1]! - skin.facesUm[i]!) * 1e-6;
        const diagonal = c + 0.5 * (above(i) + below(i)) - (i === 0 ? 0 : (0.5 * above(i)) ** 2 / lower[i - 1]!);
        lower[i] = diagonal;
        if (i > 0) right[i]! += (0.5 * above(i) * right[i - 1]!) / lower[i - 1]!;
      }
      state = new Float64Array(size);
      for (let i = size - 1; i >= 0; i--) state[i] = (right[i]! + 0.5 * below(i) * (state[i + 1] ?? 0)) / lower[i]!;
      while (next < samplesS.length && (step + 1) * stepS >= samplesS[next]! - 1e-12) {
        results.push(state);
        next++;
      }
    }
    return results;
  }

  it('rests when nothing cools it, and starts from that rest at the surface', () => {
    const heat = prepareLayeredHeat({
      grid: skin,
      phases: always(10, 23),
      emission: emissionIntervals({ durationS: 1e-3 }),
      timesS: [0, 1, 30],
      placesUm: [0, 400, 9000],
    });
    [0, 1, 2].forEach((time) => {
      expect(heat.baselineC[time]).toBeCloseTo(34, 9);
    });
    expect(heat.baselineC[3]).toBeGreaterThan(34);
    expect(heat.baselineC[6]).toBe(37);
    expect(heat.coldestSurfaceC).toBeCloseTo(34, 9);
  });

  it('remembers the coldest surface of the cooling before the pulse', () => {
    const heat = prepareLayeredHeat({
      grid: skin,
      phases,
      emission: emissionIntervals({ durationS: 1e-3 }),
      timesS: [0.1],
      placesUm: [0],
      modes: skinModes,
    });
    expect(heat.coldestSurfaceC).toBeLessThan(-10);
    expect(heat.coldestSurfaceC).toBeGreaterThan(-26);
    expect(heat.baselineC[0]).toBeGreaterThan(heat.coldestSurfaceC);
  });

  it('treats a phase split in two as one', () => {
    const whole = prepareLayeredHeat({
      grid: skin,
      phases: always(500, 5),
      emission: emissionIntervals({ durationS: 0.1 }),
      timesS,
      placesUm,
    });
    const parts: SurfacePhase[] = [
      { fromS: 0, toS: 0.05, heatTransferWPerM2K: 500, temperatureC: 5 },
      { fromS: 0.05, toS: Number.POSITIVE_INFINITY, heatTransferWPerM2K: 500, temperatureC: 5 },
    ];
    const split = prepareLayeredHeat({
      grid: skin,
      phases: parts,
      emission: emissionIntervals({ durationS: 0.1 }),
      timesS,
      placesUm,
    });
    const source = exponential(3000, skin);
    const [one, two] = [whole.responseK(source), split.responseK(source)];
    one.forEach((rise, i) => {
      expect(two[i]).toBeCloseTo(rise, 9);
    });
    whole.baselineC.forEach((value, i) => {
      expect(split.baselineC[i]).toBeCloseTo(value, 9);
    });
  });
});

describe('superposition of pulses', () => {
  const skin = makeHeatGrid(
    [
      { thicknessUm: 70, material: epidermis },
      { thicknessUm: 1500, material: dermis },
      { thicknessUm: 6000, material: fat },
    ],
    { longestS: 1000 },
  );
  const source = exponential(3000, skin);
  const peak = (repetitionRateHz: number, pulseCount: number) => {
    const emission = emissionIntervals({ durationS: 1e-3 }, { repetitionRateHz, pulseCount });
    const endS = emission[emission.length - 1]!.endS;
    return prepareLayeredHeat({
      grid: skin,
      phases: always(10, 23),
      emission,
      timesS: [endS],
      placesUm: [35],
      modes: skinModes,
    }).responseK(source)[0]!;
  };

  it('is one pulse of the whole energy as the spacing goes to nothing', () => {
    const emission = emissionIntervals({ durationS: 3e-3 });
    const joined = prepareLayeredHeat({ grid: skin, phases: always(10, 23), emission, timesS: [3e-3], placesUm: [35] }).responseK(
      source,
    )[0]!;
    expect(peak(1000, 3) / 3).toBeCloseTo(joined, 10);
  });

  // A wide beam cools in one dimension, so slowly that a second pulse still feels the first after minutes.
  it('is a single pulse as the spacing grows without end', () => {
    const second = [10, 0.1, 0.001].map((rate) => peak(rate, 2) / peak(1, 1) - 1);
    expect(second[0]).toBeGreaterThan(0.5);
    expect(second[1]).toBeGreaterThan(second[2]!);
    expect(second[2]).toBeLessThan(0.03); // the heated 0.3 mm over root(pi kappa t) = 17 mm
  });

  it.each([
    [200, 1e-9],
    [1000, 5e-4],
  ])('of %d pulses is the sum of their answers, within %d', (pulseCount, tolerance) => {
    const rate = 50;
    const times = Array.from({ length: pulseCount }, (_, i) => 1e-3 + i / rate);
    const single = prepareLayeredHeat({
      grid: skin,
      phases: always(10, 23),
      emission: emissionIntervals({ durationS: 1e-3 }),
      timesS: times,
      placesUm: [35],
      modes: skinModes,
    }).responseK(source);
    const sum = single.reduce((total, rise) => total + rise, 0);
    expect(Math.abs(peak(rate, pulseCount) / sum - 1)).toBeLessThan(tolerance);
  });
});

describe('numerical range', () => {
  it.each([1e-12, 1e-9, 1e-6, 1e-3, 1, 1000])('is finite and positive for a pulse of %d s', (durationS) => {
    const emission = emissionIntervals({ durationS });
    const times = [0.5 * durationS, durationS, 2 * durationS, durationS + 1];
    const grid = makeHeatGrid(
      [
        { thicknessUm: 70, material: epidermis },
        { thicknessUm: 1500, material: dermis },
      ],
      { longestS: 1000 },
    );
    const rises = prepareLayeredHeat({
      grid,
      phases: always(10, 23),
      emission,
      timesS: times.sort((a, b) => a - b),
      placesUm: [0, 70],
    }).responseK(grid.centersUm.map(() => 10));
    for (const rise of rises) expect(rise).toBeGreaterThan(0);
    if (durationS <= 1e-6) expect(rises[1]! / ((10 * 1e6) / (1150 * 3600))).toBeCloseTo(1, 2);
  });

  it('refuses phases with a gap, phases that end, and times that go back', () => {
    const base = { grid: homogeneous, emission: emissionIntervals({ durationS: 1e-3 }), placesUm: [0] };
    const gap = [
      { ...always(1, 1)[0]!, toS: 1 },
      { ...always(1, 1)[0]!, fromS: 2 },
    ];
    expect(() => prepareLayeredHeat({ ...base, phases: gap, timesS: [0] })).toThrowError(/follow each other/);
    expect(() => prepareLayeredHeat({ ...base, phases: [gap[0]!], timesS: [0] })).toThrowError(/follow each other/);
    expect(() => prepareLayeredHeat({ ...base, phases: always(1, 1), timesS: [1, 0.5] })).toThrowError(/ascend/);
  });
});
