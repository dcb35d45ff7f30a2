import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { inEvent, personInput } from './talks.contract';
import { talkMinutes, talkTitle } from './talks-abstract.contract';

export const courseInput = z.strictObject({
  letter: z.string().regex(/^[A-Z]$/, 'One capital letter.'),
  title: talkTitle,
  shortTitle: z.string().trim().min(1, 'This is needed.').max(18, 'At most 18 letters.'),
  /** Nights between lectures, at least. */
  minNights: z.number().int().min(0).max(6),
  /** Lectures of the course a day, at most. */
  maxPerDay: z.number().int().min(1).max(4),
});
export const courseSchema = courseInput.extend({
  id,
  lectures: z.array(z.object({ talkId: id, number: z.number().int(), title: z.string() })),
  version: z.number().int(),
});
export type Course = z.infer<typeof courseSchema>;
export const listCourses = endpoint({
  id: 'talks.courses',
  method: 'GET',
  path: '/api/events/:event/courses',
  summary: 'Lecture courses with their lectures in order.',
  params: inEvent,
  response: z.object({
    items: z.array(courseSchema),
    prerequisites: z.array(z.object({ before: id, after: id })),
  }),
});
export const createCourse = endpoint({
  id: 'talks.create_course',
  method: 'POST',
  path: '/api/events/:event/courses',
  summary: 'Create a lecture course with so many lectures, and exercise sessions where wanted.',
  params: inEvent,
  body: courseInput.extend({
    lectures: z.number().int().min(1).max(30),
    minutes: talkMinutes,
    exerciseMinutes: talkMinutes.nullable().default(null),
    lecturers: z.array(personInput).max(4),
    tutors: z.array(personInput).max(6).default([]),
  }),
  response: courseSchema,
});
export const updateCourse = endpoint({
  id: 'talks.update_course',
  method: 'PUT',
  path: '/api/events/:event/courses/:course',
  summary: 'Change the particulars of a course.',
  params: z.object({ event: slug, course: id }),
  body: courseInput,
  response: courseSchema,
  versioned: true,
});
export const replacePrerequisites = endpoint({
  id: 'talks.prerequisites',
  method: 'PUT',
  path: '/api/events/:event/prerequisites',
  summary: 'Save which lecture needs which other before it; circles are refused.',
  params: inEvent,
  body: z.strictObject({ pairs: z.array(z.strictObject({ before: id, after: id })).max(500) }),
  response: z.object({ pairs: z.array(z.object({ before: id, after: id })) }),
});

export const talksCoursesEndpoints = [listCourses, createCourse, updateCourse, replacePrerequisites];
