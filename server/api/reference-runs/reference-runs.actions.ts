import { uuidv7 } from 'uuidv7';
import type { z } from 'zod';
import { Remarks } from '../../../domain/quantities/caution.js';
import { DomainError } from '../../../domain/quantities/errors.js';
import type { ReferenceData } from '../../../domain/reference/reference-data.js';
import type { OpticalLayer } from '../../../domain/tissue/optical-layer.js';
import { resolveSkin } from '../../../domain/tissue/skin.js';
import { skinLayers } from '../../../domain/tissue/skin-layers.js';
import type { BeamProfile } from '../../../domain/transport/beam-profile.js';
import { solveLight } from '../../../domain/transport/layered-solver.js';
import { planRun, type RunQuestion } from '../../../domain/transport/monte-carlo.js';
import type { Db } from '../../db/database.js';
import { type Provenanced, presentCalculation } from '../../http/calculation.js';
import { RequestError } from '../../http/request-error.js';
import type { JobQueue } from '../../jobs/job-queue.js';
import type { RunOrder } from '../../workers/pursue-run.js';
import { engine } from './reference-runs.jobs.js';
import type { RunPlanRecord } from './reference-runs.present.js';
import type { ReferenceRunRequest } from './reference-runs.schema.js';
import { endRun, findRun, insertRun, listRuns, type StoredRun } from './reference-runs.store.js';

export type RunBody = z.output<typeof ReferenceRunRequest>;

export interface ReferenceRunsParts extends Provenanced {
  readonly db: Db;
  readonly reference: ReferenceData;
  readonly queue: JobQueue;
}

const usualSeed = 1;
const usualErrorTarget = 0.01;
const usualMaxSeconds = 300;
const retryAfterS = '30';

export function startRun(parts: ReferenceRunsParts, clinicId: string | null, body: RunBody): StoredRun {
  const remarks = new Remarks();
  const question: RunQuestion = {
    layers: layersOf(body, parts.reference, remarks),
    beams: [beamOf(body)],
    depthsUm: body.depthsMm.map((depthMm) => depthMm * 1000),
  };
  planRun(question);
  const order = orderOf(body, question);
  const solution = solveLight(question.layers, { accuracy: 'fine' });
  const fast = {
    fluenceRatios: [...solution.fluenceRatios(question.beams[0]!, question.depthsUm)],
    diffuseReflectance: solution.diffuseReflectance,
    transmittance: solution.transmittance,
    absorbedFraction: solution.absorbedFraction,
  };
  const { cautions, assumptions, provenance } = presentCalculation({ result: null, remarks, body, seed: order.seed }, parts);
  const record: RunPlanRecord = { order, fast, basis: { cautions, assumptions, provenance } };
  const id = uuidv7();
  if (parts.queue.isFull) {
    throw new RequestError('busy', 'As many reference runs wait as may wait; send this one again later.', [], {
      'retry-after': retryAfterS,
    });
  }
  insertRun(parts.db, { id, clinicId, createdAt: parts.now().toISOString(), plan: JSON.stringify(record), engine });
  parts.queue.offer(id);
  return findRun(parts.db, clinicId, id)!;
}

function layersOf({ skin, wavelengthNm }: RunBody, reference: ReferenceData, remarks: Remarks): readonly OpticalLayer[] {
  if (skin.layers) return skin.layers.map((layer, i) => ({ ...layer, name: layer.name ?? `layer ${i + 1}` }));
  if (wavelengthNm === undefined) throw new DomainError('contradiction', 'wavelengthNm is missing', { fields: ['wavelengthNm'] });
  return skinLayers(resolveSkin(skin, reference.skin, remarks), wavelengthNm, reference, remarks);
}

function beamOf({ spot, measuredProfile }: RunBody): BeamProfile | null {
  return measuredProfile ? { shape: 'measured', ...measuredProfile } : (spot ?? null);
}

function orderOf({ photons, standardErrorTarget, seed, maxSeconds }: RunBody, question: RunQuestion): RunOrder {
  const photonsPerChunk = photons === undefined ? 500 : Math.min(5000, Math.max(100, Math.ceil(photons / 64)));
  return {
    question,
    seed: seed ?? usualSeed,
    photonsPerChunk,
    chunkLimit: Math.ceil((photons ?? 1_000_000_000) / photonsPerChunk),
    standardErrorTarget: photons === undefined ? (standardErrorTarget ?? usualErrorTarget) : null,
    maxSeconds: maxSeconds ?? usualMaxSeconds,
  };
}

export function readRun({ db }: ReferenceRunsParts, clinicId: string | null, id: string): StoredRun {
  const run = findRun(db, clinicId, id);
  if (!run) throw new RequestError('not-found', 'There is no such reference run.');
  return run;
}

export function listRunsAfter(
  { db }: ReferenceRunsParts,
  clinicId: string | null,
  last: string | number | undefined,
  count: number,
) {
  return listRuns(db, clinicId, last === undefined ? null : String(last), count);
}

export function cancelRun(parts: ReferenceRunsParts, clinicId: string | null, id: string): StoredRun {
  const run = readRun(parts, clinicId, id);
  const ended = endRun(parts.db, id, { status: 'cancelled', finishedAt: parts.now().toISOString() });
  if (ended) parts.queue.cancel(id);
  else if (run.status !== 'cancelled')
    throw new RequestError('conflict', `The run is ${run.status}; only an unfinished run can be cancelled.`);
  return readRun(parts, clinicId, id);
}
