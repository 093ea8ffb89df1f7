import type { z } from 'zod';
import { testLadder } from '../../../domain/dosimetry/test-ladder.js';
import { Remarks } from '../../../domain/quantities/caution.js';
import { makeExposureModel } from '../../../domain/ranking/exposure-model.js';
import { windowOf } from '../../../domain/ranking/fluence-window.js';
import { planHeat } from '../../../domain/ranking/heat-plan.js';
import { planLight } from '../../../domain/ranking/light-plan.js';
import type { JudgedCandidate } from '../../../domain/ranking/rank.js';
import { sampleWindows } from '../../../domain/ranking/sample-windows.js';
import { moveInputs, uncertainInputs } from '../../../domain/ranking/uncertain-inputs.js';
import type { TargetKind } from '../../../domain/targets/target.js';
import type { Parts } from '../../parts.js';
import { pulseEndS } from '../../schemas/beam.js';
import { breakdownFluenceJPerCm2, prepare } from './exposure.actions.js';
import type { LadderRequest } from './exposure.schema.js';

const usualFirstFraction = 0.4;
const usualSteps = 4;
const samples = 128; // the lower bound then moves by a few percent from one seed to another
const seed = 1;

// Common practice, no source: minutes for vascular and pigment end points, days to weeks for late pigment change.
const waits: Readonly<Record<TargetKind, { waitS: number; endPoints: string[] }>> = {
  vessel: { waitS: 600, endPoints: ['purpura or darkening of the vessel', 'disappearance or spasm of the vessel'] },
  'hair-follicle': { waitS: 900, endPoints: ['perifollicular redness and swelling', 'singed or expelled hair'] },
  'epidermal-pigment': { waitS: 600, endPoints: ['slight ash-gray darkening or faint whitening of the lesion'] },
  'dermal-pigment': { waitS: 600, endPoints: ['immediate faint whitening without bleeding'] },
  'sebaceous-gland': { waitS: 1800, endPoints: ['mild redness that settles within hours'] },
  'water-layer': { waitS: 1800, endPoints: ['mild redness and swelling that settle within hours'] },
};
const darkSkinWaitS = 14 * 24 * 3600; // common practice, no source: days to weeks in dark skin
const darkFromFraction = 0.03; // between phototypes IV and V of the map

const stopRules = [
  'Stop at the first step that shows the end point; treat no higher.',
  'Stop at graying, whitening of the surface, blistering, epidermal separation or pain out of proportion.',
  'Stop when the reaction spreads beyond the spot or lasts longer than expected.',
  'Do not go on to the next step before the waiting time is over and a licensed clinician has looked.',
];

/** Steps of fluence for test patches below the lower bound of the epidermal limit. */
export function climb(body: z.output<typeof LadderRequest>, parts: Parts, clinicId: string | null) {
  const { firstFraction = usualFirstFraction, steps = usualSteps, ...setting } = body;
  const { remarks, model, deposit, heat, train, reference } = prepare(setting, parts, clinicId);
  const breakdown = breakdownFluenceJPerCm2(body.pulse);
  const question = { skin: model.skin, target: body.target, cooling: body.cooling, reference };
  const inputs = uncertainInputs(question);
  const judgedBy = (window: JudgedCandidate['window']): JudgedCandidate => ({
    candidate: { line: { wavelengthNm: body.wavelengthNm }, pulseDurationS: pulseEndS(body.pulse), spot: body.spot },
    window,
    absorptionContrast: null,
    fluenceRatioAtTarget: null,
    deliverable: true,
    reasons: [],
  });
  const { ordered } = sampleWindows({
    judged: [judgedBy(windowOf(model, deposit, heat, breakdown))],
    inputs,
    judge: (deviations) => {
      const moved = makeExposureModel({ ...moveInputs(question, deviations), remarks: new Remarks() });
      return [
        judgedBy(
          windowOf(
            moved,
            planLight(moved, body.wavelengthNm).depositUnder(body.spot),
            planHeat(moved, body.pulse, train),
            breakdown,
          ),
        ),
      ];
    },
    samples,
    seed,
    safetyFactor: 1,
  });
  const spread = ordered[0]!.spread!;
  const limitLow = spread.epidermalLimitQuantilesJPerCm2[0]!;
  const threshold = spread.targetThresholdQuantilesJPerCm2[1] ?? null;
  const ladder = testLadder(limitLow, firstFraction, steps);
  if (threshold === null || threshold > ladder[ladder.length - 1]!.fluenceJPerCm2) {
    remarks.caution(
      'end-point-beyond-ladder',
      'The target is not expected to respond within these steps: choose another wavelength, pulse, spot or cooling rather than more fluence.',
    );
  }
  const dark = model.skin.melanosomeFraction >= darkFromFraction;
  const { waitS, endPoints } = waits[body.target.kind];
  const result = {
    steps: ladder,
    waitS: dark ? darkSkinWaitS : waitS,
    endPoints,
    stopRules,
    epidermalLimitLowJPerCm2: limitLow,
    targetThresholdJPerCm2: threshold,
  };
  return { result, remarks, body, seed };
}
