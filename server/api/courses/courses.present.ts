import type { Reader } from '../../db/reader.js';
import { bookkeepingOf } from './courses.actions.js';
import type { CourseRecord } from './courses.store.js';

const note = 'Sums over visits are bookkeeping. Fluences of separate visits do not add up to a biological dose.';
const msPerDay = 86_400_000;

export function presentCourse({ id, version, recordedAt, content }: CourseRecord) {
  return { id, version, recordedAt, ...content };
}

/** A course with its visits. */
export function presentCourseWithVisits(reader: Reader, course: CourseRecord, asOf: string | undefined) {
  const { visits, setSum } = bookkeepingOf(reader, course.id, asOf);
  const sum = (pick: (visit: (typeof visits)[number]) => number) => visits.reduce((total, visit) => total + pick(visit), 0);
  return {
    ...presentCourse(course),
    bookkeeping: {
      note,
      exposures: sum(({ exposures }) => exposures),
      pulses: sum(({ pulses }) => pulses),
      cumulativeSetFluenceJPerCm2: setSum,
      visits: visits.map((visit, i) => ({
        from: new Date(visit.fromMs).toISOString(),
        to: new Date(visit.toMs).toISOString(),
        exposures: visit.exposures,
        pulses: visit.pulses,
        meanDeliveredFluenceJPerCm2: visit.deliveredSum / visit.exposures,
        daysSinceLast: i === 0 ? null : (visit.fromMs - visits[i - 1]!.toMs) / msPerDay,
      })),
    },
  };
}
