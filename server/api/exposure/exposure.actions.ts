import type { z } from 'zod';
import { breakdownIrradianceWPerCm2 } from '../../../domain/interaction/breakdown.js';
import { Remarks } from '../../../domain/quantities/caution.js';
import { type ExposureModel, makeExposureModel, type Train } from '../../../domain/ranking/exposure-model.js';
import { boilingC, windowOf } from '../../../domain/ranking/fluence-window.js';
import { planHeat } from '../../../domain/ranking/heat-plan.js';
import { heatingOf } from '../../../domain/ranking/heating.js';
import { planLight } from '../../../domain/ranking/light-plan.js';
import { windowReasons } from '../../../domain/ranking/rank.js';
import { criticalTemperatureC } from '../../../domain/thermal/damage.js';
import { emissionIntervals } from '../../../domain/thermal/emission.js';
import { tissueDiffusivityMm2PerS } from '../../../domain/thermal/relaxation.js';
import { skinAtRest } from '../../../domain/thermal/surface-cooling.js';
import { thermalDamageTimeS } from '../../../domain/thermal/thermal-damage-time.js';
import { resolveSkin } from '../../../domain/tissue/skin.js';
import { lightErrorFraction } from '../../../domain/transport/light-error.js';
import type { Parts } from '../../parts.js';
import { withTargetChromophore } from '../chromophores/chromophores.store.js';
import type { HeatingRequest, WindowRequest } from './exposure.schema.js';

type Setting = z.output<typeof WindowRequest>;

export function prepare(body: Setting, shared: Parts, clinicId: string | null) {
  const parts = withTargetChromophore(shared, clinicId, body.target);
  const remarks = new Remarks();
  const { reference } = parts;
  const skin = resolveSkin(body.skin, reference.skin, remarks);
  const model = makeExposureModel({
    skin,
    target: body.target,
    cooling: body.cooling,
    reference,
    remarks,
    solve: parts.lightFields.solve,
  });
  const deposit = planLight(model, body.wavelengthNm).depositUnder(body.spot);
  const train: Train | undefined =
    body.pulseCount !== undefined && body.pulseCount > 1
      ? { pulseCount: body.pulseCount, repetitionRateHz: body.repetitionRateHz! }
      : undefined;
  const heat = planHeat(model, body.pulse, train);
  remarks.caution('test-patch-first', 'Test patch first; wait the stated interval; clinical end points decide.');
  remarks.caution(
    'flat-uniform-tissue',
    'The tissue is taken as flat layers of even pigment without hair, scar, tattoo or bubbles in them, the blood as still; heat is followed in depth, so late temperatures under small spots are too high.',
  );
  if (train)
    remarks.caution('stacked-pulses', 'Margins of single pulses do not hold for stacked, overlapping or repeated pulses.');
  if (lightErrorFraction(body.spot) > 0.05)
    remarks.caution('narrow-beam', 'The beam is narrower than those the light solver was proved for.');
  return { remarks, model, deposit, heat, train, reference };
}

export function findWindow(body: Setting, parts: Parts, clinicId: string | null) {
  const { remarks, model, deposit, heat } = prepare(body, parts, clinicId);
  const window = windowOf(model, deposit, heat, breakdownFluenceJPerCm2(body.pulse));
  const result = {
    ...window,
    relaxationTimeS: model.target.relaxationTimeS,
    ...damageTime(model),
    fluenceRatioAtTarget: deposit.fluenceRatioAtTarget,
    absorptionContrast: deposit.absorptionContrast,
    reasons: windowReasons(model, window, 1),
  };
  return { result, remarks, body };
}

/** Fluence of one pulse at which one of its parts would break the tissue down. */
export function breakdownFluenceJPerCm2(pulse: Setting['pulse']): number {
  const parts = emissionIntervals(pulse).map(({ startS, endS, energyFraction }) => ({
    durationS: endS - startS,
    energyFraction,
  }));
  return Math.min(
    ...parts.map(({ durationS, energyFraction }) => (breakdownIrradianceWPerCm2(durationS) * durationS) / energyFraction),
  );
}

// Extended theory: only where heater and target differ, with the heater held just below boiling.
function damageTime({ target, remarks }: ExposureModel): { thermalDamageTimeS?: number | null } {
  const { inclusion, effect } = target;
  if (!inclusion || effect.by !== 'damage' || inclusion.effectRadiusUm <= inclusion.heaterRadiusUm) return {};
  remarks.assume({ name: 'heldHeaterC', value: boilingC, unit: 'C', source: 'Altshuler2001', status: 'convention' });
  const time = thermalDamageTimeS({
    geometry: inclusion.geometry,
    heaterRadiusUm: inclusion.heaterRadiusUm,
    targetRadiusUm: inclusion.effectRadiusUm,
    diffusivityMm2PerS: tissueDiffusivityMm2PerS,
    heaterC: boilingC,
    damageC: criticalTemperatureC(effect.pair),
    startC: skinAtRest.coreC,
  });
  return { thermalDamageTimeS: time };
}

export function heat(body: z.output<typeof HeatingRequest>, parts: Parts, clinicId: string | null) {
  const { remarks, model, deposit, heat: plan } = prepare(body, parts, clinicId);
  const { timesS, places, vaporization } = heatingOf(model, deposit, plan, body.fluenceJPerCm2);
  if (vaporization.expected) {
    remarks.caution(
      'vaporization',
      'Water boils or granules vaporize: the linear heat solution overstates temperatures beyond that, and bubbles change the damage.',
    );
  }
  const result = {
    timesS: Array.from(timesS),
    places: places.map((history) => ({
      ...history,
      temperaturesC: Array.from(history.temperaturesC),
      damageIntegral: Math.min(history.damageIntegral, Number.MAX_VALUE),
      cem43Min: Math.min(history.cem43Min, Number.MAX_VALUE),
    })),
    vaporization,
  };
  return { result, remarks, body };
}
