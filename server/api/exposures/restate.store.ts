import { evaluateAlerts } from '../../../domain/alerts/index.js';
import type { Writer } from '../../audit/with-audit.js';
import { alertsOfExposure, insertAlert } from '../alerts/alerts.store.js';
import { ClinicBook } from './clinic-book.store.js';
import { doseOf, factsOf } from './exposure-facts.js';
import { effective } from './exposure-versions.js';
import { eachExposure, listCorrections } from './exposures.store.js';

/** Rules whose verdict depends on what is known of the device. */
const ofDelivery = ['overdose', 'calibration-lapsed'];

/** Puts the exposures of a device since a time to the rules again, after a calibration or service that came late, and raises what is new.
 *  What was computed when they came in stays in their rows. */
export function restateAlerts(writer: Writer, deviceId: string, fromMs: number): { restated: number; alerts: number } {
  const book = new ClinicBook(writer);
  const file = book.device(deviceId);
  let restated = 0;
  let alerts = 0;
  for (const row of file ? eachExposure(writer, { deviceId, fromMs }) : []) {
    const { exposure, status } = effective(row, listCorrections(writer, row.id));
    if (status === 'entered-in-error') continue;
    const dose = doseOf(exposure, file!);
    if (dose.response.calibrationIds.join(' ') === row.calibrationIds) continue;
    restated++;
    const protocol = exposure.protocolId === undefined ? 'none' : (book.protocol(exposure.protocolId, row.atMs) ?? 'none');
    const found = evaluateAlerts(factsOf(exposure, file!, dose, protocol, null)).filter(({ rule }) => ofDelivery.includes(rule));
    if (found.length === 0) continue;
    const raised = alertsOfExposure(writer, row.id);
    for (const finding of found) {
      if (raised.some(({ rule, content }) => rule === finding.rule && content.text === finding.text)) continue;
      insertAlert(writer, { deviceId, exposureId: row.id, courseId: row.courseId, atMs: row.atMs }, finding);
      alerts++;
    }
  }
  return { restated, alerts };
}
