import type { EventDetail } from '@shared/features/events/events.contract';
import { addDays } from '@shared/lib/time';
import { systemActor, type PersonView } from '@server/features/accounts/accounts.service';
import { decideTalk, readTalk, withdrawTalk } from '@server/features/talks/talks.service';
import { handInAbstract, saveAbstract, submitTalk } from '@server/features/talks/talks-abstract.service';
import { createCourse, savePresence } from '@server/features/talks/talks-courses.service';
import { inviteSpeaker } from '@server/features/talks/talks-invitation.service';
import { createTalk } from '@server/features/talks/talks-structure.service';
import { as, type Cast } from './10-accounts';
import { abstractFor, courses, talkTitles, type CourseSeed } from './pools';

const msc = ['05C15', '52C23', '57K10', '11H06', '52B20', '05A05', '06A07', '52C17', '05E14', '11P21'];
const text = (n: number) => ({
  title: talkTitles[n % talkTitles.length] as string,
  abstract: abstractFor(n),
  coAuthors: [],
  msc: [msc[n % msc.length] as string, msc[(n + 3) % msc.length] as string],
  references: [],
  needs: n % 3 === 0 ? (['projector'] as const).slice() : [],
});

async function talk(
  event: EventDetail,
  kind: 'plenary' | 'invited' | 'contributed',
  person: PersonView,
  n: number,
  withAbstract = true,
): Promise<string> {
  const minutes = { plenary: 60, invited: 50, contributed: 25 }[kind];
  const made = await createTalk(systemActor, event.id, {
    kind,
    title: text(n).title,
    minutes,
    questionMinutes: 5,
    courseId: null,
    number: null,
    exerciseOf: null,
    expectedAudience: kind === 'contributed' ? 30 : 100,
    people: [{ accountId: person.id, part: 'speaker' }],
  });
  if (withAbstract) {
    const saved = await saveAbstract(systemActor, event.id, made.id, made.version, text(n));
    await handInAbstract(systemActor, event.id, made.id, saved.version);
  }
  return made.id;
}

/** Titles with mathematics and abstracts; the last lecture of every third course is still without one. */
async function writeLectures(
  event: EventDetail,
  course: CourseSeed,
  lectures: { talkId: string; number: number }[],
): Promise<void> {
  for (const { talkId, number } of lectures) {
    const { version } = await readTalk(systemActor, event.id, talkId);
    const n = course.letter.charCodeAt(0) + number;
    const title = course.lectures[number - 1] as string;
    const saved = await saveAbstract(systemActor, event.id, talkId, version, {
      title,
      abstract: abstractFor(n),
      coAuthors: [],
      msc: [course.msc],
      references: [],
      needs: [],
    });
    if (number < lectures.length || n % 3 !== 0)
      await handInAbstract(systemActor, event.id, talkId, saved.version);
  }
}

const blank = { courseId: null, number: null, exerciseOf: null };

/** Courses, exercises, invited and contributed talks of the school, in every state. */
export async function seedSchoolTalks(cast: Cast, event: EventDetail): Promise<void> {
  const { crowd } = cast;
  for (const [index, course] of courses.entries()) {
    const tutor = crowd[20 + index] as PersonView;
    const made = await createCourse(systemActor, event.id, {
      letter: course.letter,
      title: course.title,
      shortTitle: course.shortTitle,
      minNights: 1,
      maxPerDay: 1,
      lectures: course.lectures.length,
      minutes: 50,
      exerciseMinutes: index < 4 ? 90 : null,
      lecturers: [{ accountId: (crowd[index] as PersonView).id, part: 'speaker' }],
      tutors: [{ accountId: tutor.id, part: 'tutor' }],
    });
    await writeLectures(event, course, made.lectures);
    const arrive = addDays(event.startsOn, -1);
    await savePresence({ ...as(crowd[index] as PersonView) }, event.id, undefined, {
      arrivesAt: `${arrive}T17:20`,
      leavesAt: `${addDays(event.startsOn, index === 1 ? 3 : 11)}T${index === 1 ? '10:20' : '16:00'}`,
      blocked: [],
      wishes: index === 1 ? 'Mornings' : '',
    });
  }
  for (let n = 0; n < 8; n++) await talk(event, 'invited', crowd[8 + n] as PersonView, n, n < 6);
  for (let n = 0; n < 14; n++) await talk(event, 'contributed', crowd[30 + n] as PersonView, 8 + n, n < 11);
  await talk(event, 'contributed', cast.by.speaker, 4);
  await createTalk(systemActor, event.id, {
    kind: 'social',
    title: 'Opening',
    minutes: 30,
    questionMinutes: 0,
    ...blank,
    expectedAudience: 120,
    people: [],
  });
  await createTalk(systemActor, event.id, {
    kind: 'social',
    title: 'Walk to the Varde lighthouse',
    minutes: 90,
    questionMinutes: 0,
    ...blank,
    expectedAudience: 80,
    people: [],
  });
  await createTalk(systemActor, event.id, {
    kind: 'discussion',
    title: 'Open problems',
    minutes: 60,
    questionMinutes: 0,
    ...blank,
    expectedAudience: 60,
    people: [{ accountId: cast.by.chair.id, part: 'chair' }],
  });
  await createTalk(systemActor, event.id, {
    kind: 'poster',
    title: 'Posters in the winter garden',
    minutes: 60,
    questionMinutes: 0,
    ...blank,
    expectedAudience: 60,
    people: [],
  });
  for (const [n, person] of [46, 47, 48, 49].entries()) {
    const submitted = await submitTalk(
      {
        ...as(crowd[person] as PersonView),
        grants: [{ role: 'organiser', scope: 'event', scopeId: event.id }],
      },
      event.slug,
      text(22 + n),
    );
    if (n === 0)
      await decideTalk(systemActor, event.id, submitted.id, undefined, {
        decision: 'declined',
        note: 'The subject is too far from the courses.',
      });
    if (n === 1) await withdrawTalk(systemActor, event.id, submitted.id, undefined, 'Cannot come.');
  }
  const invited = [
    { givenName: 'Adaeze', familyName: 'Nwosu-Hjelm' },
    { givenName: 'Aurelia', familyName: 'Fjæreby' },
  ];
  for (const [n, name] of invited.entries()) {
    await inviteSpeaker(systemActor, event.id, {
      email: `invited${n + 1}@example.org`,
      ...name,
      affiliation: 'Ikenga Institute',
      kind: 'invited',
      minutes: 50,
      questionMinutes: 5,
      message: '',
    });
  }
}

/** Five days of the conference: invited in the mornings, contributed in the afternoons. */
export async function seedConferenceTalks(cast: Cast, event: EventDetail, scale: number): Promise<string[]> {
  const ids: string[] = [];
  const { crowd } = cast;
  for (let n = 0; n < 5; n++) ids.push(await talk(event, 'plenary', crowd[60 + n] as PersonView, n));
  for (let n = 0; n < 10; n++)
    ids.push(await talk(event, 'invited', n === 0 ? cast.by.speaker : (crowd[66 + n] as PersonView), 10 + n));
  for (let n = 0; n < 24 * scale; n++)
    ids.push(
      await talk(event, 'contributed', crowd[(80 + n) % crowd.length] as PersonView, 20 + n, n % 9 !== 0),
    );
  return ids;
}

export async function seedWorkshopTalks(cast: Cast, event: EventDetail): Promise<string[]> {
  const ids: string[] = [];
  for (let n = 0; n < 10; n++)
    ids.push(await talk(event, 'invited', cast.crowd[120 + n] as PersonView, 30 + n));
  return ids;
}
