import type { Pulse } from '../../domain/beam/pulse.js';
import type { Spot } from '../../domain/beam/spot.js';
import { Remarks } from '../../domain/quantities/caution.js';
import { DomainError } from '../../domain/quantities/errors.js';
import { listCandidates } from '../../domain/ranking/candidates.js';
import { makeExposureModel } from '../../domain/ranking/exposure-model.js';
import { type FluenceWindow, windowOf } from '../../domain/ranking/fluence-window.js';
import { planHeat } from '../../domain/ranking/heat-plan.js';
import { planLight } from '../../domain/ranking/light-plan.js';
import { type JudgedCandidate, PlanStore, rankCandidates } from '../../domain/ranking/rank.js';
import type { ReferenceData } from '../../domain/reference/reference-data.js';
import type { Target } from '../../domain/targets/target.js';
import type { Cooling } from '../../domain/thermal/surface-cooling.js';
import { resolveSkin, type SkinDescription } from '../../domain/tissue/skin.js';
import { loadReferenceData } from '../../server/reference/load.js';
import { dataFolder } from './data-folder.js';

let loaded: ReferenceData | undefined;

/** The reference data of the tree, read once. */
export function referenceData(): ReferenceData {
  loaded ??= loadReferenceData(dataFolder);
  return loaded;
}

interface Question {
  readonly skin: SkinDescription;
  readonly target: Target;
  readonly cooling?: Cooling;
}

function modelOf({ skin, target, cooling }: Question) {
  const reference = referenceData();
  const remarks = new Remarks();
  return makeExposureModel({ skin: resolveSkin(skin, reference.skin, remarks), target, cooling, reference, remarks });
}

const noBreakdown = () => 1000;

/** Ranks wavelengths x pulses x spots with the domain alone. */
export function askRanking(
  question: Question & {
    readonly wavelengthsNm: readonly number[];
    readonly pulseDurationsS: readonly number[];
    readonly spots: readonly Spot[];
  },
): JudgedCandidate[] {
  const model = modelOf(question);
  const candidates = listCandidates({
    lines: question.wavelengthsNm.map((wavelengthNm) => ({ wavelengthNm })),
    pulseDurationsS: question.pulseDurationsS,
    spots: question.spots,
    relaxationTimeS: model.target.relaxationTimeS,
  });
  return rankCandidates(candidates, new PlanStore(model), {
    safetyFactor: 1,
    breakdownFluenceJPerCm2: noBreakdown,
    deliverability: () => [],
  });
}

/** The fluence window of one setting. */
export function askWindow(
  question: Question & { readonly wavelengthNm: number; readonly pulse: Pulse; readonly spot: Spot },
): FluenceWindow {
  const model = modelOf(question);
  const deposit = planLight(model, question.wavelengthNm).depositUnder(question.spot);
  if (deposit instanceof DomainError) throw deposit;
  return windowOf(model, deposit, planHeat(model, question.pulse), noBreakdown());
}
