import type { RunAnswer } from '../../../domain/transport/monte-carlo.js';
import type { presentCalculation } from '../../http/calculation.js';
import type { RunOrder, StopReason } from '../../workers/pursue-run.js';
import type { StoredRun } from './reference-runs.store.js';

/** The fast answer and the words that go with a run, fixed when it is made. */
export interface RunPlanRecord {
  readonly order: RunOrder;
  readonly fast: {
    readonly fluenceRatios: readonly number[];
    readonly diffuseReflectance: number;
    readonly transmittance: number;
    readonly absorbedFraction: number;
  };
  readonly basis: Pick<ReturnType<typeof presentCalculation>, 'cautions' | 'assumptions' | 'provenance'>;
}

export function presentRun(run: StoredRun) {
  const { order, basis } = JSON.parse(run.plan) as RunPlanRecord;
  return {
    id: run.id,
    createdAt: run.createdAt,
    finishedAt: run.finishedAt,
    status: run.status,
    progressFraction: run.progressFraction,
    photonsDone: run.chunks * order.photonsPerChunk,
    ...(run.result === null ? {} : { result: JSON.parse(run.result) }),
    ...(run.failure === null ? {} : { failure: run.failure }),
    ...basis,
  };
}

export function presentAnswer(
  { order, fast }: RunPlanRecord,
  answer: RunAnswer,
  resolutionsUm: Float64Array,
  stoppedBy: StopReason,
  elapsedS: number,
) {
  const found = answer.fluenceRatios[0]!;
  return {
    depthsMm: order.question.depthsUm.map((depthUm) => depthUm / 1000),
    fluenceRatios: found.map(({ value }) => value),
    standardErrors: found.map(({ standardError }) => standardError),
    resolutionsUm: [...resolutionsUm],
    fastFluenceRatios: fast.fluenceRatios,
    differencesInStandardErrors: found.map(({ value, standardError }, i) =>
      standardError > 0 ? (value - fast.fluenceRatios[i]!) / standardError : null,
    ),
    specularReflectance: answer.specularReflectance,
    diffuseReflectance: answer.diffuseReflectance,
    transmittance: answer.transmittance,
    absorbedFraction: answer.absorbedFraction,
    layerAbsorbedFractions: answer.layerAbsorbedFractions.map((part, i) => ({ name: order.question.layers[i]!.name, ...part })),
    fast: {
      diffuseReflectance: fast.diffuseReflectance,
      transmittance: fast.transmittance,
      absorbedFraction: fast.absorbedFraction,
    },
    abandonedFraction: answer.abandonedFraction,
    energyBalanceError: answer.balanceError,
    photons: answer.photons,
    stoppedBy,
    elapsedS,
  };
}
