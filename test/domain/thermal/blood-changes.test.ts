import { describe, expect, it } from 'vitest';
import {
  bloodAbsorptionFactor,
  type ChangingVessel,
  changingVesselC,
  changingVesselThreshold,
  methemoglobinFactor,
  shadedFactor,
} from '../../../domain/thermal/blood-changes.js';
import { fluenceForDamage } from '../../../domain/thermal/damage.js';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { prepareInclusionHeat } from '../../../domain/thermal/inclusion-heat.js';
import { sampleTimesS } from '../../../domain/thermal/sample-times.js';
import { blood, dermis, vesselWall } from './media.js';

const emission = emissionIntervals({ durationS: 1.5e-3 });
const timesS = sampleTimesS(emission, 2, 60);
const vessel = (factor: (temperatureC: number) => number): ChangingVessel => ({
  geometry: 'cylinder',
  radiusUm: 40,
  inside: blood,
  outside: dermis,
  emission,
  timesS,
  placesRadiusUm: [0, 40],
  heatPerCm: 100,
  baselineC: timesS.map(() => 34),
  backgroundK: timesS.map(() => 0.5),
  factor,
});

describe('blood that changes while it heats', () => {
  it('[Verkruysse et al 1998] absorbs 2.5 times as much at 100 C as at 20 C', () => {
    expect(bloodAbsorptionFactor(100)).toBeCloseTo(2.5, 12);
    expect(bloodAbsorptionFactor(20)).toBe(1);
    expect(bloodAbsorptionFactor(300)).toBeCloseTo(2.5, 12);
    expect(bloodAbsorptionFactor(37, 37)).toBe(1);
  });

  it('is the linear answer when nothing changes', () => {
    const { excessK } = prepareInclusionHeat({ ...vessel(() => 1) });
    const temperaturesC = changingVesselC(
      vessel(() => 1),
      3,
    );
    excessK.forEach((rise, i) => {
      expect(temperaturesC[i]).toBeCloseTo(34 + 3 * (0.5 + 100 * rise), 6);
    });
  });

  it('heats exponentially when absorption follows the temperature and nothing is lost', () => {
    const short = emissionIntervals({ durationS: 1e-7 });
    const times = sampleTimesS(short, 1e-6, 40);
    const gain = 0.01; // per K above 34 C
    const request = {
      ...vessel((t) => 1 + gain * (t - 34)),
      emission: short,
      timesS: times,
      baselineC: times.map(() => 34),
      backgroundK: times.map(() => 0),
    };
    const at = times.indexOf(1e-7);
    const linear = (2 * 100) / ((1060 * 3890) / 1e6);
    expect(changingVesselC(request, 2)[at]! - 34).toBeCloseTo(Math.expm1(gain * linear) / gain, 1);
  });

  it('needs less fluence than blood that does not change, and no less than by its greatest factor', () => {
    const plain = vessel(() => 1);
    const responseK = prepareInclusionHeat(plain)
      .excessK.subarray(timesS.length)
      .map((rise, i) => 100 * rise + plain.backgroundK[i]!);
    const linear = fluenceForDamage({ timesS, baselineC: plain.baselineC, responseK, pair: vesselWall })!;
    expect(changingVesselThreshold(plain, 1, vesselWall)! / linear).toBeCloseTo(1, 4);
    const changing = changingVesselThreshold(
      vessel((t) => bloodAbsorptionFactor(t)),
      1,
      vesselWall,
    )!;
    expect(changing).toBeLessThan(0.75 * linear);
    expect(changing).toBeGreaterThan(0.4 * linear);
  });

  it('is null where no fluence suffices, and 0 where none is needed', () => {
    expect(
      changingVesselThreshold(
        vessel(() => 1),
        1,
        vesselWall,
        0.5,
      ),
    ).toBeNull();
    expect(changingVesselThreshold({ ...vessel(() => 1), baselineC: timesS.map(() => 120) }, 1, vesselWall)).toBe(0);
  });

  it('turns to methemoglobin from 70 C on, as far as the caller says', () => {
    expect(methemoglobinFactor(69, 0.3, 4)).toBe(1);
    expect(methemoglobinFactor(70, 0.3, 4)).toBeCloseTo(1.9, 12);
    expect(() => methemoglobinFactor(70, 1.2, 4)).toThrowError(expect.objectContaining({ code: 'out-of-range' }));
  });

  it('gains nothing in a vessel that is black already', () => {
    expect(shadedFactor(2, 1e-3, 50)).toBeCloseTo(2, 4);
    expect(shadedFactor(2, 5000, 500)).toBeCloseTo(1, 6);
  });
});
