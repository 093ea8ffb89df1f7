import type { App } from '../../http/app-type.js';
import { registerVersionedRoutes } from '../../http/versioned-routes.js';
import type { Parts } from '../../parts.js';
import { changeCourse, openCourse } from './courses.actions.js';
import { presentCourse, presentCourseWithVisits } from './courses.present.js';
import { CourseItem, CourseRequest } from './courses.schema.js';
import { type CourseContent, type CourseRecord, findCourse, listCourses } from './courses.store.js';

export function registerCoursesRoutes(app: App, parts: Parts): void {
  const { ledger, access } = parts;
  registerVersionedRoutes<CourseContent, CourseRecord>(app, {
    path: '/v1/courses',
    tag: 'courses',
    noun: 'course',
    body: CourseRequest,
    item: CourseItem,
    writeRole: 'operator',
    list: ({ clinicId }, options) => listCourses(ledger.reader(clinicId), options),
    find: ({ clinicId }, id, asOf) => findCourse(ledger.reader(clinicId), id, asOf),
    create: (actor, body) => openCourse(parts, actor, body),
    change: (actor, id, next) => changeCourse(parts, actor, id, next),
    bodyOf: ({ content }) => content,
    present: presentCourse,
    presentOne: (kept, { clinicId }, asOf) => presentCourseWithVisits(ledger.reader(clinicId), kept, asOf),
    onRead: (actor, path, id) => access.note(actor, path, id),
  });
}
