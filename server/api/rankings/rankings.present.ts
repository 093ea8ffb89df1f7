import type { Spot } from '../../../domain/beam/spot.js';
import { spotAreaCm2 } from '../../../domain/beam/spot-area.js';
import type { JudgedCandidate } from '../../../domain/ranking/rank.js';

export function presentRanked({ candidate, window, ...facts }: JudgedCandidate, rank: number) {
  const { line, pulseDurationS, spot } = candidate;
  return {
    rank,
    wavelengthNm: line.wavelengthNm,
    pulseDurationS,
    spotDiameterMm: equalDiameterMm(spot),
    ...(line.deviceId === undefined ? {} : { deviceId: line.deviceId }),
    ...(line.medium === undefined ? {} : { medium: line.medium }),
    targetThresholdJPerCm2: window?.targetThresholdJPerCm2 ?? null,
    epidermalLimitJPerCm2: window?.epidermalLimitJPerCm2 ?? null,
    therapeuticRatio: window?.therapeuticRatio ?? null,
    absorptionContrast: facts.absorptionContrast,
    fluenceRatioAtTarget: facts.fluenceRatioAtTarget,
    limitedBy: window?.limitedBy ?? null,
    deliverable: facts.deliverable,
    reasons: [...facts.reasons],
    ...facts.spread,
  };
}

function equalDiameterMm(spot: Spot): number {
  if ('diameterMm' in spot) return spot.diameterMm;
  return 20 * Math.sqrt(spotAreaCm2(spot) / Math.PI);
}
