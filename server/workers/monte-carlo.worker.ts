import { planRun, type RunPlan, type RunQuestion, runChunk } from '../../domain/transport/monte-carlo.js';

export interface ChunkTask {
  readonly runKey: string;
  readonly question: RunQuestion;
  readonly seed: number;
  readonly chunk: number;
  readonly photons: number;
}

let prepared: { runKey: string; plan: RunPlan } | undefined;

export function walkChunk({ runKey, question, seed, chunk, photons }: ChunkTask): Float64Array {
  if (prepared?.runKey !== runKey) prepared = { runKey, plan: planRun(question) };
  return runChunk(prepared.plan, seed, chunk, photons);
}
