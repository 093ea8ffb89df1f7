import type { ReferenceData } from '../reference/reference-data.js';
import type { Target } from '../targets/target.js';
import type { Cooling } from '../thermal/surface-cooling.js';
import type { ResolvedSkin } from '../tissue/skin.js';

/** A question about one exposure, before anything is computed. */
export interface ExposureQuestion {
  readonly skin: ResolvedSkin;
  readonly target: Target;
  readonly cooling?: Cooling | undefined;
  readonly reference: ReferenceData;
}

/** Something not known exactly: the standard deviation of its logarithm, and the question with it changed by a factor. */
export interface UncertainInput {
  readonly input: string;
  readonly logDeviation: number;
  readonly scaled: (question: ExposureQuestion, factor: number) => ExposureQuestion;
}

const sizeDeviation = 0.1; // a diameter or depth that was estimated; common practice, no source
const conductivityDeviation = 0.1; // spread of the rows of YeDe2017 table 3 for one tissue
const measuredThicknessDeviation = 0.05; // a thickness that was measured; common practice, no source

/** Bounds that hold about 95 % become a standard deviation of the logarithm. */
const deviationOf = (low: number, high: number): number => (low > 0 && high > low ? Math.log(high / low) / 4 : 0);

/** What is uncertain about a question, all of it taken as lognormal and independent. Inputs without spread are left out. */
export function uncertainInputs(question: ExposureQuestion): UncertainInput[] {
  const { skin, target, cooling, reference } = question;
  const thickness = reference.skin.structure.epidermis_thickness;
  const inputs: UncertainInput[] = [
    {
      input: 'skin.melanosomeFraction',
      logDeviation: deviationOf(skin.melanosomeFractionLow, skin.melanosomeFractionHigh),
      scaled: (moved, factor) => withSkin(moved, { melanosomeFraction: Math.min(0.9, skin.melanosomeFraction * factor) }),
    },
    {
      input: 'skin.bloodFraction',
      logDeviation: deviationOf(skin.bloodFractionLow, skin.bloodFractionHigh),
      scaled: (moved, factor) => withSkin(moved, { bloodFraction: Math.min(0.9, skin.bloodFraction * factor) }),
    },
    {
      input: 'skin.scattering',
      logDeviation: Math.log(reference.skin.scattering.dermis.spreadFactor) / 2,
      scaled: (moved, factor) => withSkin(moved, { scatteringFactor: skin.scatteringFactor * factor }),
    },
    {
      input: 'skin.epidermisThicknessUm',
      logDeviation:
        skin.epidermisThicknessUm === thickness.value ? deviationOf(thickness.low, thickness.high) : measuredThicknessDeviation,
      scaled: (moved, factor) => withSkin(moved, { epidermisThicknessUm: skin.epidermisThicknessUm * factor }),
    },
    {
      input: 'tissue.conductivity',
      logDeviation: conductivityDeviation,
      scaled: (moved, factor) => ({ ...moved, reference: withConductivity(reference, factor) }),
    },
  ];
  if ('depthMm' in target) {
    inputs.push({
      input: 'target.depthMm',
      logDeviation: sizeDeviation,
      scaled: (moved, factor) => withTarget(moved, { depthMm: target.depthMm * factor }),
    });
  }
  for (const size of ['diameterUm', 'shaftDiameterUm', 'granuleDiameterUm'] as const) {
    const value = (target as Readonly<Partial<Record<typeof size, number>>>)[size];
    if (value === undefined) continue;
    inputs.push({
      input: `target.${size}`,
      logDeviation: sizeDeviation,
      scaled: (moved, factor) => withTarget(moved, { [size]: value * factor }),
    });
  }
  if (cooling && cooling.kind !== 'none') {
    const figure = reference.thermal.cooling.get(cooling.kind);
    const usual = cooling.heatTransferWPerM2K ?? figure?.heatTransferWPerM2K;
    if (figure && usual) {
      inputs.push({
        input: 'cooling.heatTransferWPerM2K',
        logDeviation: deviationOf(figure.heatTransferLowWPerM2K, figure.heatTransferHighWPerM2K),
        scaled: (moved, factor) => ({ ...moved, cooling: { ...cooling, heatTransferWPerM2K: usual * factor } }),
      });
    }
  }
  return inputs.filter(({ logDeviation }) => logDeviation > 0);
}

/** The question with every uncertain input moved by so many standard deviations. Shape: one number for each of `uncertainInputs`. */
export function moveInputs(question: ExposureQuestion, deviations: ArrayLike<number>): ExposureQuestion {
  return uncertainInputs(question).reduce(
    (moved, { logDeviation, scaled }, i) =>
      deviations[i] === 0 ? moved : scaled(moved, Math.exp(deviations[i]! * logDeviation)),
    question,
  );
}

const withSkin = (moved: ExposureQuestion, change: Partial<ResolvedSkin>): ExposureQuestion => ({
  ...moved,
  skin: { ...moved.skin, ...change },
});

const withTarget = (moved: ExposureQuestion, change: object): ExposureQuestion => ({
  ...moved,
  target: { ...moved.target, ...change } as Target,
});

function withConductivity(reference: ReferenceData, factor: number): ReferenceData {
  const materials = new Map(
    [...reference.thermal.materials].map(([id, material]) => [
      id,
      { ...material, conductivityWPerMK: material.conductivityWPerMK * factor },
    ]),
  );
  return { ...reference, thermal: { ...reference.thermal, materials } };
}
