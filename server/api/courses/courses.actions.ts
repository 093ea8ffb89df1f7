import { uuidv7 } from 'uuidv7';
import { visitHours } from '../../../domain/alerts/short-interval.js';
import type { Reader } from '../../db/reader.js';
import type { Actor } from '../../http/actor.js';
import type { Parts } from '../../parts.js';
import { ClinicBook } from '../exposures/clinic-book.store.js';
import { doseOf } from '../exposures/exposure-facts.js';
import { effective } from '../exposures/exposure-versions.js';
import { eachExposure, listCorrections } from '../exposures/exposures.store.js';
import { type CourseContent, type CourseRecord, findCourse, insertCourse } from './courses.store.js';

export function openCourse({ ledger }: Parts, actor: Actor, content: CourseContent): CourseRecord {
  const id = uuidv7();
  const change = { clinicId: actor.clinicId, actor, kind: 'course.opened', subject: id };
  return ledger.change(change, (writer) => insertCourse(writer, id, 1, content));
}

export function changeCourse(
  { ledger }: Parts,
  actor: Actor,
  id: string,
  next: (known: CourseRecord) => CourseContent,
): CourseRecord | null {
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'course.changed', subject: id }, (writer) => {
    const known = findCourse(writer, id);
    return known && insertCourse(writer, id, known.version + 1, next(known));
  });
}

interface Visit {
  readonly fromMs: number;
  toMs: number;
  exposures: number;
  pulses: number;
  deliveredSum: number;
}

/** Sums over a course, visit by visit. */
export function bookkeepingOf(reader: Reader, courseId: string, asOf: string | undefined) {
  const book = new ClinicBook(reader, asOf);
  const visits: Visit[] = [];
  let setSum = 0;
  for (const row of eachExposure(reader, { courseId, asOf })) {
    const { exposure, status } = effective(row, listCorrections(reader, row.id, { asOf }));
    if (status === 'entered-in-error') continue;
    const { delivered } = doseOf(exposure, book.device(row.deviceId)!);
    let visit = visits[visits.length - 1];
    if (!visit || row.atMs - visit.toMs > visitHours * 3_600_000) {
      visit = { fromMs: row.atMs, toMs: row.atMs, exposures: 0, pulses: 0, deliveredSum: 0 };
      visits.push(visit);
    }
    visit.toMs = row.atMs;
    visit.exposures++;
    visit.pulses += exposure.pulseCount;
    visit.deliveredSum += delivered.deliveredFluenceJPerCm2;
    setSum += delivered.setFluenceJPerCm2 * (exposure.stackCount ?? 1);
  }
  return { visits, setSum };
}
