import { col, fn, Op, where } from 'sequelize';
import type { TalkKind, TalkListRow, TalkState } from '@shared/features/talks/talks.contract';
import type { Page } from '@shared/http/page';
import { foldCase } from '@shared/lib/text';
import type { Actor } from '@server/http/authorize';
import { accountsById } from '@server/features/accounts/accounts.service';
import { MaterialRow, TalkPersonRow, TalkRow } from './talks.model';
import { isOrganiser } from './talks.policy';
import { presentTalkRow } from './talks.presenter';
import { coursesOf } from './talks.service';

/** Talks of an event, the latest first, by filters. Reviewers see no drafts. */
export async function listTalks(
  actor: Actor,
  eventId: string,
  query: {
    cursor?: string;
    limit: number;
    state?: TalkState;
    kind?: TalkKind;
    q?: string;
    missing?: 'abstract' | 'answer' | 'slides';
  },
): Promise<Page<TalkListRow>> {
  const named = query.q ? await talksWithPerson(eventId, query.q) : [];
  const rows = await TalkRow.findAll({
    where: {
      [Op.and]: [
        { eventId },
        query.state ? { state: query.state } : {},
        isOrganiser(actor, eventId) ? {} : { state: { [Op.ne]: 'draft' } },
        query.kind ? { kind: query.kind } : {},
        query.q
          ? {
              [Op.or]: [
                where(fn('instr', fn('lower', col('title')), query.q.toLowerCase()), Op.gt, 0),
                { id: named },
              ],
            }
          : {},
        query.missing === 'abstract' ? { abstractAt: null, ...OWING } : {},
        query.missing === 'answer' ? { invitation: 'invited' } : {},
        query.missing === 'slides' ? { id: { [Op.notIn]: await talksWithSlides(eventId) }, ...OWING } : {},
        query.cursor ? { id: { [Op.lt]: query.cursor } } : {},
      ],
    },
    order: [['id', 'DESC']],
    limit: query.limit + 1,
  });
  const page = rows.slice(0, query.limit);
  const ids = page.map((row) => row.id);
  const [people, courses, slides] = await Promise.all([
    TalkPersonRow.ofTalks(ids),
    coursesOf(eventId),
    MaterialRow.findAll({ where: { talkId: ids, kind: 'slides' }, attributes: ['talkId'] }),
  ]);
  const persons = await accountsById(people.map((person) => person.accountId));
  const courseById = new Map(courses.map((course) => [course.id, course]));
  const withSlides = new Set(slides.map((row) => row.talkId));
  return {
    items: page.map((talk) =>
      presentTalkRow(
        talk,
        people.filter((person) => person.talkId === talk.id),
        persons,
        courseById,
        withSlides,
      ),
    ),
    next: rows.length > query.limit ? (page[page.length - 1]?.id ?? null) : null,
  };
}

/** Talks that are on and come with an abstract and slides. */
const OWING = {
  kind: ['plenary', 'invited', 'contributed', 'course_lecture'],
  state: ['draft', 'submitted', 'accepted'],
};

async function talksWithSlides(eventId: string): Promise<string[]> {
  const talks = await TalkRow.findAll({ where: { eventId }, attributes: ['id'] });
  const slides = await MaterialRow.findAll({
    where: { talkId: talks.map((talk) => talk.id), kind: 'slides' },
    attributes: ['talkId'],
  });
  return slides.map((row) => row.talkId);
}

async function talksWithPerson(eventId: string, q: string): Promise<string[]> {
  const people = await TalkPersonRow.findAll({
    where: {
      talkId: (await TalkRow.findAll({ where: { eventId }, attributes: ['id'] })).map((row) => row.id),
    },
  });
  const persons = await accountsById(people.map((person) => person.accountId));
  return people
    .filter((person) => foldCase(persons.get(person.accountId)?.printedName ?? '').includes(foldCase(q)))
    .map((person) => person.talkId);
}
