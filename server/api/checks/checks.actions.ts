import { uuidv7 } from 'uuidv7';
import { driftFinding } from '../../../domain/alerts/drift.js';
import { isSameSpot, sameLineNm, setEnergyJ } from '../../../domain/dosimetry/calibration.js';
import { type ConstancyLevels, driftChart, judgeConstancy, worseVerdict } from '../../../domain/dosimetry/drift.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Reader } from '../../db/reader.js';
import type { Actor } from '../../http/actor.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import { insertAlert } from '../alerts/alerts.store.js';
import { findDevice } from '../devices/devices.store.js';
import { findMeter, untraceableReasons } from '../meters/meters.store.js';
import { listServices } from '../services/services.store.js';
import { type CheckBody, type CheckContent, type CheckRecord, insertCheck, listChecks } from './checks.store.js';

type Setting = Pick<CheckBody, 'wavelengthNm' | 'spot' | 'handpiece'>;

/** Checks belong on one chart when wavelength, spot and handpiece are the same. */
export function isSameSetting(a: Setting, b: Setting): boolean {
  return Math.abs(a.wavelengthNm - b.wavelengthNm) <= sameLineNm && isSameSpot(a.spot, b.spot) && a.handpiece === b.handpiece;
}

/** Checks of a setting since the last service before a time, oldest first. */
export function seriesOf(reader: Reader, deviceId: string, setting: Setting, upToMs: number, asOf?: string): CheckRecord[] {
  const services = listServices(reader, deviceId, { asOf }).flatMap(({ atMs }) => (atMs! <= upToMs ? [atMs!] : []));
  const fromMs = services[services.length - 1] ?? Number.NEGATIVE_INFINITY;
  return listChecks(reader, deviceId, { asOf }).filter(
    ({ atMs, content }) => atMs! >= fromMs && atMs! <= upToMs && isSameSetting(content, setting),
  );
}

/** The chart of a series; readings of nothing have no logarithm and are left to the levels. */
export function chartOf(
  series: readonly Pick<CheckContent, 'measuredAt' | 'meanPulseEnergyJ' | 'setPulseEnergyJ'>[],
  levels: ConstancyLevels,
) {
  const points = series
    .filter(({ meanPulseEnergyJ }) => meanPulseEnergyJ > 0)
    .map((check) => ({ atMs: Date.parse(check.measuredAt), ratio: check.meanPulseEnergyJ / check.setPulseEnergyJ }));
  return driftChart(points, levels);
}

export function addCheck({ ledger }: Parts, actor: Actor, deviceId: string, body: CheckBody): CheckRecord {
  const id = uuidv7();
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'check.added', subject: id }, (writer) => {
    const device = findDevice(writer, deviceId)!;
    const levels = body.levels ?? device.content.constancyLevels;
    const earlier = seriesOf(writer, deviceId, body, Date.parse(body.measuredAt));
    const judged = judge(body, levels, earlier);
    const chart = chartOf([...earlier.map(({ content }) => content), judged], levels);
    const record = insertCheck(writer, id, deviceId, {
      ...judged,
      notTraceableBecause: reasonsAgainst(writer, body, judged.meanPulseEnergyJ),
      slopePerDay: chart.slopePerDay,
      actionLevelAt: timeText(chart.actionLevelAtMs),
      chartAlarm: chart.alarm,
    });
    const finding = driftFinding(judged.verdict, chart);
    if (finding) {
      const place = { deviceId, exposureId: null, courseId: null, atMs: record.atMs! };
      insertAlert(writer, place, { rule: 'drift', ...finding, evidence: { ...finding.evidence, checkId: id } });
    }
    writer.note({ deviceId, verdict: judged.verdict });
    return record;
  });
}

export const timeText = (ms: number | null): string | null => (ms === null ? null : new Date(ms).toISOString());

function judge(body: CheckBody, levels: ConstancyLevels, earlier: readonly CheckRecord[]) {
  const readings = body.pulseEnergiesJ;
  const n = readings.length;
  const mean = readings.reduce((sum, reading) => sum + reading, 0) / n;
  const setJ = setEnergyJ(body.set, body.spot);
  const spread = Math.sqrt(readings.reduce((sum, reading) => sum + (reading - mean) ** 2, 0) / (n - 1));
  const repeatability = n > 1 && mean > 0 ? spread / mean : null;
  const first = earlier.find(({ content }) => content.verdict === 'pass' && content.setPulseEnergyJ === setJ);
  const baseline = body.baselinePulseEnergyJ ?? first?.content.meanPulseEnergyJ ?? null;
  const ofDisplay = judgeConstancy(mean, setJ, levels);
  const ofBaseline = baseline === null ? 'pass' : judgeConstancy(mean, baseline, levels);
  const ofSpread = repeatability !== null && repeatability > levels.warningFraction ? 'warning' : 'pass';
  return {
    ...body,
    levels,
    meanPulseEnergyJ: mean,
    setPulseEnergyJ: setJ,
    repeatabilityFraction: repeatability,
    deviationFromDisplayFraction: mean / setJ - 1,
    deviationFromBaselineFraction: baseline === null ? null : mean / baseline - 1,
    verdict: worseVerdict(worseVerdict(ofDisplay, ofBaseline), ofSpread),
  };
}

function reasonsAgainst(writer: Writer, body: CheckBody, pulseEnergyJ: number): string[] {
  if (body.meterId === undefined) return [];
  const meter = findMeter(writer, body.meterId);
  if (!meter) {
    const errors = [{ pointer: '/meterId', detail: 'must be the id of a meter of this clinic' }];
    throw new RequestError('invalid-request', 'The check cannot be stored; see errors.', errors);
  }
  const { measuredAt: at, wavelengthNm, repetitionRateHz } = body;
  return untraceableReasons(meter, { at, wavelengthNm, pulseEnergyJ, repetitionRateHz });
}

/** Every chart of a device at a time. */
export function readDrift(
  { ledger, now }: Parts,
  actor: Actor,
  deviceId: string,
  query: { wavelengthNm?: number; handpiece?: string; asOf?: string },
) {
  const reader = ledger.reader(actor.clinicId);
  const device = findDevice(reader, deviceId, query.asOf);
  if (!device) throw new RequestError('not-found', 'There is no such device.');
  const upToMs = query.asOf === undefined ? now().getTime() : Date.parse(query.asOf);
  const settings: Setting[] = [];
  for (const { content } of listChecks(reader, deviceId, { asOf: query.asOf })) {
    if (query.wavelengthNm !== undefined && Math.abs(content.wavelengthNm - query.wavelengthNm) > sameLineNm) continue;
    if (query.handpiece !== undefined && content.handpiece !== query.handpiece) continue;
    if (!settings.some((setting) => isSameSetting(setting, content))) settings.push(content);
  }
  return {
    deviceId,
    charts: settings.map((setting) => {
      const series = seriesOf(reader, deviceId, setting, upToMs, query.asOf).map(({ content }) => content);
      const chart = chartOf(series, device.content.constancyLevels);
      return {
        wavelengthNm: setting.wavelengthNm,
        spot: setting.spot,
        handpiece: setting.handpiece ?? null,
        checks: series.length,
        standardDeviation: chart.standardDeviation,
        shewhartLimit: chart.shewhartLimit,
        ewmaLimit: chart.ewmaLimit,
        slopePerDay: chart.slopePerDay,
        slopeStandardErrorPerDay: chart.slopeStandardError,
        actionLevelAt: timeText(chart.actionLevelAtMs),
        alarm: chart.alarm,
        points: chart.points.map(({ atMs, ...point }) => ({ measuredAt: new Date(atMs).toISOString(), ...point })),
      };
    }),
  };
}
