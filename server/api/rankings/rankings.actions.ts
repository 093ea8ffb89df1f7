import type { z } from 'zod';
import { breakdownIrradianceWPerCm2 } from '../../../domain/interaction/breakdown.js';
import { Remarks } from '../../../domain/quantities/caution.js';
import {
  type Candidate,
  type CandidateLine,
  listCandidates,
  logSpacedS,
  wavelengthRangeNm,
} from '../../../domain/ranking/candidates.js';
import { obstaclesOf } from '../../../domain/ranking/deliverable.js';
import { makeExposureModel } from '../../../domain/ranking/exposure-model.js';
import { hasWindow, type JudgedCandidate, judgeCandidates, orderCandidates, PlanStore } from '../../../domain/ranking/rank.js';
import { sampleWindows } from '../../../domain/ranking/sample-windows.js';
import { type ExposureQuestion, moveInputs, uncertainInputs } from '../../../domain/ranking/uncertain-inputs.js';
import { resolveSkin } from '../../../domain/tissue/skin.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import { withTargetChromophore } from '../chromophores/chromophores.store.js';
import { deviceLines } from '../devices/devices.store.js';
import { presentRanked } from './rankings.present.js';
import type { RankingRequest } from './rankings.schema.js';

type Body = z.output<typeof RankingRequest>;

const usualLimit = 50;
const usualSeed = 1;
const mostCandidates = 20_000;

export function rank(body: Body, shared: Parts, clinicId: string | null) {
  const parts = withTargetChromophore(shared, clinicId, body.target);
  const remarks = new Remarks();
  const { reference } = parts;
  const skin = resolveSkin(body.skin, reference.skin, remarks);
  const question: ExposureQuestion = { skin, target: body.target, cooling: body.cooling, reference };
  const model = makeExposureModel({ ...question, remarks, solve: parts.lightFields.solve });
  const candidates = candidatesOf(body, parts, clinicId, model.target.relaxationTimeS, remarks);
  const safetyFactor = body.safetyFactor ?? 1;
  const options = {
    safetyFactor,
    breakdownFluenceJPerCm2: (pulseDurationS: number) => breakdownIrradianceWPerCm2(pulseDurationS) * pulseDurationS,
    deliverability: obstaclesOf,
  };
  const unordered = judgeCandidates(candidates, new PlanStore(model), options);
  const seed = body.seed ?? usualSeed;
  const judged =
    body.samples === undefined
      ? orderCandidates(unordered, safetyFactor)
      : sampled(question, unordered, { samples: body.samples, seed, safetyFactor }, remarks, (moved) =>
          judgeCandidates(candidates, new PlanStore(makeExposureModel({ ...moved, remarks: new Remarks() })), options),
        );
  remarks.caution(
    'test-patch-first',
    'Test patch first; wait the stated interval; clinical end points decide. A ranking names what is worth a test patch, never what to treat at.',
  );
  remarks.caution(
    'flat-uniform-tissue',
    'The tissue is taken as flat layers of even pigment without hair, scar, tattoo or bubbles in them, the blood as still; heat is followed in depth, so late temperatures under small spots are too high.',
  );
  remarks.caution('single-pulses', 'Margins hold for single pulses: overlap, stacking and repeated passes are not covered.');
  const items = judged.slice(0, body.limit ?? usualLimit).map((item, index) => presentRanked(item, index + 1));
  const bestIndex = judged.findIndex((item) => hasWindow(item.window, safetyFactor) && item.deliverable);
  const result = {
    items,
    best: bestIndex < 0 ? null : presentRanked(judged[bestIndex]!, bestIndex + 1),
    relaxationTimeS: model.target.relaxationTimeS,
    considered: judged.length,
    rejected: judged.filter((item) => !hasWindow(item.window, safetyFactor)).length,
  };
  return { result, remarks, body, seed: body.samples === undefined ? undefined : seed };
}

function sampled(
  question: ExposureQuestion,
  judged: readonly JudgedCandidate[],
  wanted: { samples: number; seed: number; safetyFactor: number },
  remarks: Remarks,
  judge: (moved: ExposureQuestion) => JudgedCandidate[],
): JudgedCandidate[] {
  const inputs = uncertainInputs(question);
  for (const { input, logDeviation } of inputs) {
    remarks.assume({ name: `deviation of ln ${input}`, value: logDeviation, source: 'JCGM101', status: 'derived' });
  }
  const { ordered, surfaceErrorFraction, probabilityShift } = sampleWindows({
    ...wanted,
    judged,
    inputs,
    judge: (deviations) => judge(moveInputs(question, deviations)),
  });
  remarks.assume({
    name: 'surfaceErrorFraction',
    value: surfaceErrorFraction,
    source: 'windows computed directly at three samples',
    status: 'derived',
  });
  remarks.assume({
    name: 'probabilityShift',
    value: probabilityShift,
    source: 'first candidate, half against all samples',
    status: 'derived',
  });
  return ordered;
}

function candidatesOf(body: Body, parts: Parts, clinicId: string | null, relaxationTimeS: number, remarks: Remarks): Candidate[] {
  const pulses = body.pulseDurationsS;
  const pulseDurationsS =
    pulses === undefined ? null : Array.isArray(pulses) ? pulses : logSpacedS(pulses.fromS, pulses.toS, pulses.count);
  if (pulseDurationsS === null) {
    remarks.assume({
      name: 'pulseDurationsS',
      value: '0.01 to 10 relaxation times, within what the line emits',
      source: 'AndersonParrish1983',
      status: 'convention',
    });
  }
  const lines = linesOf(body, parts, clinicId);
  const spots = body.spots ?? [body.spot!];
  const perLine = (pulseDurationsS?.length ?? 9) * spots.length; // 9: the most that defaults give
  if (lines.length * perLine > mostCandidates) {
    throw new RequestError('invalid-request', `The request asks for more than ${mostCandidates} candidates.`, [
      { pointer: '/candidates', detail: `wavelengths x pulse durations x spots must not exceed ${mostCandidates}` },
    ]);
  }
  return listCandidates({ lines, pulseDurationsS, spots, relaxationTimeS });
}

function unusableDevices(
  deviceIds: readonly string[],
  missing: readonly string[],
  outOfService: readonly string[],
): RequestError {
  const faults = deviceIds.flatMap((deviceId, i) =>
    missing.includes(deviceId) || outOfService.includes(deviceId)
      ? [
          {
            pointer: `/candidates/deviceIds/${i}`,
            detail: missing.includes(deviceId) ? `unknown device ${deviceId}` : `device ${deviceId} is out of service`,
          },
        ]
      : [],
  );
  return new RequestError('unknown-reference', 'A device is unknown or out of service.', faults);
}

function linesOf({ candidates }: Body, { reference, db }: Parts, clinicId: string | null): CandidateLine[] {
  const { wavelengthsNm, media, deviceIds } = candidates;
  if (media)
    return reference.media.map(({ medium, wavelengthNm, pulseMinS, pulseMaxS }) => ({
      medium,
      wavelengthNm,
      pulseMinS,
      pulseMaxS,
    }));
  if (deviceIds) {
    const { lines, missing, outOfService } = deviceLines({ db, clinicId }, deviceIds);
    if (missing.length + outOfService.length > 0) throw unusableDevices(deviceIds, missing, outOfService);
    return lines;
  }
  const nm = Array.isArray(wavelengthsNm)
    ? wavelengthsNm
    : wavelengthRangeNm(wavelengthsNm!.fromNm, wavelengthsNm!.toNm, wavelengthsNm!.stepNm);
  return nm.map((wavelengthNm) => ({ wavelengthNm }));
}
