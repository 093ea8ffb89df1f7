import type { Spot } from '../beam/spot.js';
import { DomainError } from '../quantities/errors.js';
import type { Candidate } from './candidates.js';
import { type ExposureModel, singlePulse } from './exposure-model.js';
import { type FluenceWindow, windowOf } from './fluence-window.js';
import { type HeatPlan, planHeat } from './heat-plan.js';
import { type Deposit, type LightPlan, planLight } from './light-plan.js';
import type { WindowSpread } from './window-spread.js';

/** One candidate with its window and the facts it is judged by. Fields are null where the optics do not reach. */
export interface JudgedCandidate {
  readonly candidate: Candidate;
  readonly window: FluenceWindow | null;
  readonly absorptionContrast: number | null;
  readonly fluenceRatioAtTarget: number | null;
  readonly deliverable: boolean;
  readonly reasons: readonly string[];
  /** What sampling of the tissue says, where it was asked for. */
  readonly spread?: WindowSpread;
}

/** Light by wavelength and heat by pulse, made once and kept while one request is answered. */
export class PlanStore {
  readonly #light = new Map<number, LightPlan | DomainError>();
  readonly #deposits = new Map<string, Deposit>();
  readonly #heat = new Map<number, HeatPlan>();

  constructor(
    readonly model: ExposureModel,
    readonly lightOf: (model: ExposureModel, wavelengthNm: number) => LightPlan = planLight,
  ) {}

  heat(pulseDurationS: number): HeatPlan {
    let plan = this.#heat.get(pulseDurationS);
    if (!plan) {
      plan = planHeat(this.model, singlePulse(pulseDurationS));
      this.#heat.set(pulseDurationS, plan);
    }
    return plan;
  }

  /** The deposit, or the refusal of a wavelength that the tables do not reach. */
  deposit(wavelengthNm: number, spot: Spot): Deposit | DomainError {
    const key = `${wavelengthNm}|${spotKey(spot)}`;
    const known = this.#deposits.get(key);
    if (known) return known;
    const light = this.#lightAt(wavelengthNm);
    if (light instanceof DomainError) return light;
    const deposit = light.depositUnder(spot);
    this.#deposits.set(key, deposit);
    return deposit;
  }

  #lightAt(wavelengthNm: number): LightPlan | DomainError {
    let plan = this.#light.get(wavelengthNm);
    if (!plan) {
      try {
        plan = this.lightOf(this.model, wavelengthNm);
      } catch (error) {
        if (!(error instanceof DomainError)) throw error;
        plan = error;
      }
      this.#light.set(wavelengthNm, plan);
    }
    return plan;
  }
}

function spotKey(spot: Spot): string {
  return 'diameterMm' in spot
    ? `${spot.shape}${spot.diameterMm}`
    : `${spot.shape}${spot.widthMm}x${'heightMm' in spot ? spot.heightMm : ''}`;
}

/** Judges every candidate, in their order. A window exists when limit / threshold is at least `safetyFactor`. */
export function judgeCandidates(
  candidates: readonly Candidate[],
  plans: PlanStore,
  options: {
    readonly safetyFactor: number;
    readonly breakdownFluenceJPerCm2: (pulseDurationS: number, wavelengthNm: number) => number;
    readonly deliverability: (candidate: Candidate, window: FluenceWindow | null) => readonly string[];
  },
): JudgedCandidate[] {
  const judged = candidates.map((candidate): JudgedCandidate => {
    const { wavelengthNm } = candidate.line;
    const deposit = plans.deposit(wavelengthNm, candidate.spot);
    if (deposit instanceof DomainError) {
      const obstacles = options.deliverability(candidate, null);
      return {
        candidate,
        window: null,
        absorptionContrast: null,
        fluenceRatioAtTarget: null,
        deliverable: obstacles.length === 0,
        reasons: [deposit.message, ...obstacles],
      };
    }
    const heat = plans.heat(candidate.pulseDurationS);
    const window = windowOf(plans.model, deposit, heat, options.breakdownFluenceJPerCm2(candidate.pulseDurationS, wavelengthNm));
    const obstacles = options.deliverability(candidate, window);
    return {
      candidate,
      window,
      absorptionContrast: deposit.absorptionContrast,
      fluenceRatioAtTarget: deposit.fluenceRatioAtTarget,
      deliverable: obstacles.length === 0,
      reasons: [...windowReasons(plans.model, window, options.safetyFactor), ...obstacles],
    };
  });
  return judged;
}

/** Judges every candidate and orders them: greater therapeutic ratio first, then lower threshold; those without a window last. */
export function rankCandidates(...[candidates, plans, options]: Parameters<typeof judgeCandidates>): JudgedCandidate[] {
  return orderCandidates(judgeCandidates(candidates, plans, options), options.safetyFactor);
}

/** True when the greatest sparing fluence is at least `safetyFactor` times the least effective one. */
export function hasWindow(window: FluenceWindow | null, safetyFactor: number): boolean {
  return window?.therapeuticRatio != null && window.therapeuticRatio > 1 && window.therapeuticRatio >= safetyFactor;
}

/** Sorts judged candidates: by probability of a window where it is known, then by ratio, then by threshold, then as listed. */
export function orderCandidates(judged: readonly JudgedCandidate[], safetyFactor: number): JudgedCandidate[] {
  return judged
    .map((item, index) => ({ item, index, open: hasWindow(item.window, safetyFactor) }))
    .sort((a, b) => {
      const chance = (b.item.spread?.probabilityOfWindow ?? 0) - (a.item.spread?.probabilityOfWindow ?? 0);
      if (chance !== 0) return chance;
      if (a.open !== b.open) return a.open ? -1 : 1;
      const ratio = (b.item.window?.therapeuticRatio ?? -1) - (a.item.window?.therapeuticRatio ?? -1);
      if (ratio !== 0) return ratio;
      const infinity = Number.POSITIVE_INFINITY;
      const threshold = (a.item.window?.targetThresholdJPerCm2 ?? infinity) - (b.item.window?.targetThresholdJPerCm2 ?? infinity);
      return threshold < 0 ? -1 : threshold > 0 ? 1 : a.index - b.index;
    })
    .map(({ item }) => item);
}

const limitText: Record<FluenceWindow['limitedBy'], string> = {
  'basal-layer': 'the basal layer of the epidermis coagulates',
  surface: 'the surface of the epidermis coagulates',
  melanosome: 'melanosomes of the epidermis vaporize',
  vaporization: 'water in the epidermis boils',
  breakdown: 'the irradiance would break the tissue down into plasma',
};

/** Why there is no window, in words; empty when there is one. */
export function windowReasons(model: ExposureModel, window: FluenceWindow, safetyFactor: number): string[] {
  if (model.target.noTarget) return [`no window: ${model.target.noTarget}`];
  const limit = `${Number(window.epidermalLimitJPerCm2.toPrecision(3))} J/cm2`;
  if (window.targetThresholdJPerCm2 === null) {
    return [`no window: no fluence up to 1,000 J/cm2 has the effect on the target (the epidermis bears ${limit})`];
  }
  if (hasWindow(window, safetyFactor)) return [];
  const threshold = `${Number(window.targetThresholdJPerCm2.toPrecision(3))} J/cm2`;
  const ratio = window.therapeuticRatio ?? 0;
  if (ratio <= 1) return [`no window: at ${limit} ${limitText[window.limitedBy]}, before the target responds at ${threshold}`];
  return [`no window: the limit of ${limit} is less than ${safetyFactor} times the threshold of ${threshold}`];
}
