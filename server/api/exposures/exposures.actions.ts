import { uuidv7 } from 'uuidv7';
import type { EarlierExposure } from '../../../domain/alerts/alert.js';
import { evaluateAlerts } from '../../../domain/alerts/index.js';
import type { Writer } from '../../audit/with-audit.js';
import { canonicalJson } from '../../codecs/canonical-json.js';
import type { Actor } from '../../http/actor.js';
import type { Fault } from '../../http/request-error.js';
import { faultsOf } from '../../http/validation.js';
import type { Parts } from '../../parts.js';
import { modelVersion } from '../../version.js';
import { type AlertRecord, insertAlert } from '../alerts/alerts.store.js';
import { type CourseRecord, findCourse } from '../courses/courses.store.js';
import type { DeviceFile } from '../devices/device-file.store.js';
import { type ClinicBook, presentBook } from './clinic-book.store.js';
import { type Dose, doseOf, factsOf, known } from './exposure-facts.js';
import { ExposureRequest } from './exposures.schema.js';
import { type ExposureContent, findByExternalId, insertExposure, lastOfSite, type NewExposureRow } from './exposures.store.js';

/** What became of one record. A conflict is other content under the same device and external id. */
export type Logged =
  | {
      readonly status: 'stored' | 'duplicate';
      readonly id: string;
      readonly exposure: ExposureContent;
      readonly dose: Dose;
      readonly alerts: readonly AlertRecord[];
    }
  | { readonly status: 'conflict' | 'invalid'; readonly errors: readonly Fault[] };

type Read = ExposureContent | readonly Fault[];

const isFaulty = (read: Read): read is readonly Fault[] => Array.isArray(read);

function readExposure(given: unknown): Read {
  const parsed = ExposureRequest.safeParse(given);
  return parsed.success ? parsed.data : faultsOf(parsed.error.issues);
}

/** Logs records in one change: each is stored, known already, or refused on its own. On disk when this returns. */
export function logExposures({ ledger }: Parts, actor: Actor, given: readonly unknown[]): Logged[] {
  const read = given.map(readExposure);
  const change = { clinicId: actor.clinicId, actor, kind: 'exposures.logged', subject: 'exposures' };
  return ledger.change(change, (writer) => {
    const log = new ExposureLog(writer);
    return read.map((entry) => (isFaulty(entry) ? { status: 'invalid', errors: entry } : log.add(entry)));
  });
}

/** One change's worth of logging. */
class ExposureLog {
  readonly #book: ClinicBook;
  readonly #courses = new Map<string, CourseRecord | null>();

  constructor(readonly writer: Writer) {
    this.#book = presentBook(writer);
  }

  add(exposure: ExposureContent): Logged {
    const file = this.#book.device(exposure.deviceId);
    const course = exposure.courseId === undefined ? undefined : this.#course(exposure.courseId);
    const protocol =
      exposure.protocolId === undefined ? 'none' : this.#book.protocol(exposure.protocolId, Date.parse(exposure.at));
    if (!file || course === null || protocol === null) return refused(file, course, protocol);
    const dose = doseOf(exposure, file);
    const { atMs } = dose.use;
    const site = known(exposure.site) ?? course?.content.site ?? null;
    const last = exposure.courseId === undefined ? null : this.#last(exposure.courseId, site, atMs);
    const id = uuidv7();
    if (!insertExposure(this.writer, rowOf(id, exposure, site, dose))) return this.#alreadyThere(exposure);
    const facts = factsOf(exposure, file, dose, protocol, last, site);
    const place = { deviceId: exposure.deviceId, exposureId: id, courseId: exposure.courseId ?? null, atMs };
    const alerts = evaluateAlerts(facts).map((finding) => insertAlert(this.writer, place, finding));
    return { status: 'stored', id, exposure, dose, alerts };
  }

  #course(id: string): CourseRecord | null {
    let course = this.#courses.get(id);
    if (course === undefined) {
      course = findCourse(this.writer, id);
      this.#courses.set(id, course);
    }
    return course;
  }

  #last(courseId: string, site: string | null, atMs: number): EarlierExposure | null {
    const row = lastOfSite(this.writer, courseId, site, atMs);
    if (!row) return null;
    const { passNumber, pulseCount, stackCount = 1 } = JSON.parse(row.content) as ExposureContent;
    return { atMs: row.atMs, passNumber: known(passNumber), isGroup: pulseCount > stackCount };
  }

  #alreadyThere(given: ExposureContent): Logged {
    const row = findByExternalId(this.writer, given.deviceId, given.externalId)!;
    const stored = JSON.parse(row.content) as ExposureContent;
    if (row.content !== JSON.stringify(given) && canonicalJson(stored) !== canonicalJson(given)) {
      const detail = 'this device has an exposure of this external id with other content; correct that one instead';
      return { status: 'conflict', errors: [{ pointer: '/externalId', detail }] };
    }
    return {
      status: 'duplicate',
      id: row.id,
      exposure: stored,
      dose: doseOf(stored, this.#book.device(given.deviceId)!),
      alerts: [],
    };
  }
}

function refused(file: DeviceFile | null, course: CourseRecord | null | undefined, protocol: unknown): Logged {
  const errors: Fault[] = [];
  if (!file) errors.push({ pointer: '/deviceId', detail: 'must be the id of a device of this clinic' });
  if (course === null) errors.push({ pointer: '/courseId', detail: 'must be the id of a course of this clinic' });
  if (protocol === null) errors.push({ pointer: '/protocolId', detail: 'must be the id of a protocol of this clinic' });
  return { status: 'invalid', errors };
}

function rowOf(id: string, exposure: ExposureContent, site: string | null, { use, response, delivered }: Dose): NewExposureRow {
  return {
    id,
    deviceId: exposure.deviceId,
    externalId: exposure.externalId,
    atMs: use.atMs,
    courseId: exposure.courseId ?? null,
    site,
    content: JSON.stringify(exposure),
    deliveredFluenceJPerCm2: delivered.deliveredFluenceJPerCm2,
    lowJPerCm2: delivered.lowJPerCm2,
    highJPerCm2: delivered.highJPerCm2,
    calibrationIds: response.calibrationIds.join(' '),
    model: modelVersion,
  };
}
