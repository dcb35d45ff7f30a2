import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { TalkCard } from '@shared/features/programme/programme.contract';
import { indexOf } from '@shared/features/programme/timetable/problem-index';
import type { Moment, Person, Problem } from '@shared/features/programme/timetable/problem';
import { clock, dayName, featureWord, whenOf } from '@shared/features/programme/timetable/words';
import { Button } from '@/components/button';
import { KindTag } from '@/components/kind-tag';
import { MathLine } from '@/components/math-text';
import { Facts } from '@/components/page-bar';
import { roomOf, seatsOf, type Composer } from './use-composer';

/** The chosen talk: who, where, when its people are there, what it must follow, what the room must have. */
export function Inspector({ composer }: { composer: Composer }) {
  const card = composer.chosen === null ? undefined : composer.cards.get(composer.chosen);
  if (!card) return <NothingChosen />;
  const slug = composer.draft.event.slug;
  return (
    <section aria-label="Chosen talk" className="px-4 py-3">
      <div className="flex items-baseline justify-between gap-3 text-dense">
        <KindTag kind={card.kind} label={card.word} />
        <Link to={`/organise/${slug}/talks/${card.talkId}`}>Open</Link>
      </div>
      <h2 className="mt-0.5 mb-2 font-serif text-[16px] leading-5">
        {card.title ? <MathLine source={card.title} /> : 'No title yet'}
      </h2>
      <Facts items={factsOf(card, composer)} />
      {composer.draft.can.change && <Actions card={card} composer={composer} />}
    </section>
  );
}

function NothingChosen() {
  return (
    <section aria-label="Chosen talk" className="px-4 py-3">
      <p className="font-serif text-[16px] leading-5">No talk is chosen.</p>
      <p className="mt-1 text-dense text-ink3">
        Click a talk, or go to it with Tab. M moves it, Alt and arrows shift it (with Shift they change its
        length), R takes the next room, Delete puts it back to be placed, P fixes it. Ctrl+Z takes back.
      </p>
    </section>
  );
}

type Fact = readonly [string, ReactNode] | null;

function factsOf(card: TalkCard, composer: Composer): Fact[] {
  const { problem, at, concerns } = composer;
  const here = at.get(card.talkId);
  const chairs = card.people.filter((person) => person.part === 'chair');
  const wish = concerns.find((concern) => concern.items.includes(card.talkId));
  return [
    [
      card.kind === 'course_lecture' ? 'Lecturer' : 'Speaker',
      namesOf(card, ['speaker', 'tutor']) || 'Nobody yet',
    ],
    chairs.length > 0 ? ['Chair', namesOf(card, ['chair'])] : null,
    [
      'At',
      here ? (
        <>
          <strong className="font-semibold">{whenOf(problem, here)}</strong>
          <br />
          {roomOf(problem, here.room)}
          {here.fixed && ', fixed'}
        </>
      ) : (
        `To be placed, ${card.minutes} min`
      ),
    ],
    ...staysOf(card, composer),
    ...orderOf(card, composer),
    ['Room needs', needsOf(card)],
    wish ? ['Wish', wish.title] : null,
  ];
}

const namesOf = (card: TalkCard, parts: string[]): string =>
  card.people
    .filter((person) => parts.includes(person.part))
    .map((person) => person.printedName)
    .join(', ');

const needsOf = (card: TalkCard): string =>
  [...card.needs.map(featureWord), ...seatsOf(card)].join(', ') || 'nothing special';

/** The stay of everybody who must be there; in alarm where a clash comes from it. */
function staysOf(card: TalkCard, { problem, clashes }: Composer): Fact[] {
  const index = indexOf(problem);
  const people = (index.item.get(card.talkId)?.persons ?? []).flatMap((id) => index.person.get(id) ?? []);
  return people
    .filter((person) => person.arrival !== null || person.departure !== null)
    .map((person): Fact => {
      const broken = clashes.some(
        (clash) => clash.rule === `presence:${person.id}` && clash.items.includes(card.talkId),
      );
      const label = people.length === 1 ? 'In residence' : `${person.shortName} stays`;
      return [
        label,
        <span className={broken ? 'font-semibold text-alarm' : ''}>{stayInWords(problem, person)}</span>,
      ];
    });
}

function stayInWords(problem: Problem, { arrival, departure }: Person): string {
  const words = (moment: Moment): string => `${dayName(problem, moment.day)} ${clock(moment.minute)}`;
  if (!arrival) return departure ? `until ${words(departure)}` : '';
  return departure ? `${words(arrival)} to ${words(departure)}` : `from ${words(arrival)}`;
}

/** What it must follow and precede, with where that stands. */
function orderOf(card: TalkCard, { problem, at }: Composer): Fact[] {
  const index = indexOf(problem);
  const item = index.item.get(card.talkId);
  if (!item) return [];
  const lectures = item.course ? (index.lectures.get(item.course) ?? []) : [];
  const own = lectures.findIndex((lecture) => lecture.id === item.id);
  const pairs = index.prerequisites.get(item.id) ?? [];
  const before = [
    lectures[own - 1]?.id,
    item.exerciseOf,
    ...pairs.filter((p) => p.after === item.id).map((p) => p.before),
  ];
  const after = [
    own >= 0 ? lectures[own + 1]?.id : undefined,
    ...(index.exercises.get(item.id) ?? []).map((exercise) => exercise.id),
    ...pairs.filter((p) => p.before === item.id).map((p) => p.after),
  ];
  const words = (ids: (string | null | undefined)[]): string =>
    ids
      .filter((id) => typeof id === 'string')
      .map((id) => {
        const spot = at.get(id);
        return `${index.item.get(id)?.label ?? ''} (${spot ? `${dayName(problem, spot.day).slice(0, 3)} ${clock(spot.start)}` : 'not placed'})`;
      })
      .join(', ');
  const [earlier, later] = [words(before), words(after)];
  return [earlier ? ['Must come after', earlier] : null, later ? ['Must come before', later] : null];
}

function Actions({ card, composer }: { card: TalkCard; composer: Composer }) {
  const here = composer.at.get(card.talkId);
  return (
    <div className="mt-3 flex flex-wrap gap-2">
      <Button onClick={() => composer.askWhere(card.talkId)} disabled={here?.fixed}>
        Move {card.word}…
      </Button>
      {here && (
        <>
          <Button onClick={() => composer.setFixed(card.talkId, !here.fixed)}>
            {here.fixed ? 'Release it' : 'Fix it here'}
          </Button>
          {!here.fixed && (
            <Button variant="link" onClick={() => composer.move([{ item: card.talkId, to: null }])}>
              Put back to be placed
            </Button>
          )}
        </>
      )}
    </div>
  );
}
