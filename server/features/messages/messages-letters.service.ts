import type { FreeLetter, LetterPreview } from '@shared/features/messages/letters.contract';
import {
  fieldNames,
  letterGroups,
  merge,
  missingFields,
  unknownFields,
  type LetterGroup,
  type MergeValues,
} from '@shared/features/messages/letter.rules';
import { plainLatex } from '@shared/lib/latex';
import { owesAbstract } from '@shared/features/talks/talks.rules';
import { count } from '@shared/lib/text';
import { formatDateSpan, formatInstant, localToInstant, zoneName } from '@shared/lib/time';
import { conflict, invalid } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import type { Actor } from '@server/http/authorize';
import { queueMessage } from '@server/mail/outbox';
import {
  accountsById,
  holdersOf,
  issueToken,
  peekToken,
  recordAudit,
  type PersonView,
} from '@server/features/accounts/accounts.service';
import { deadlinesOf, eventById } from '@server/features/events/events.service';
import { talksForProgramme, type ProgrammeTalk } from '@server/features/talks/talks.service';
import { registrationsOf } from '@server/features/registration/registration.service';
import { freeLetter } from './messages.mail';
import { LetterRefusalRow } from './messages.model';

type Event = Awaited<ReturnType<typeof eventById>>;

interface Reader {
  person: PersonView;
  values: MergeValues;
}

const isOn = (talk: ProgrammeTalk): boolean => talk.state === 'accepted';
const withPart = (talks: ProgrammeTalk[], parts: string[]): string[] =>
  talks.flatMap((talk) =>
    talk.people.filter(({ part }) => parts.includes(part)).map(({ accountId }) => accountId),
  );

async function membersOf(eventId: string, group: LetterGroup, talks: ProgrammeTalk[]): Promise<string[]> {
  const registered = async (states: string[]) =>
    (await registrationsOf(eventId))
      .filter(({ state }) => states.includes(state))
      .map(({ accountId }) => accountId);
  switch (group) {
    case 'speakers':
      return withPart(talks.filter(isOn), ['speaker']);
    case 'owing_abstract':
      return withPart(
        talks.filter((talk) => isOn(talk) && owesAbstract(talk.kind) && talk.abstractAt === null),
        ['speaker'],
      );
    case 'chairs':
      return withPart(talks.filter(isOn), ['chair', 'tutor']);
    case 'participants':
      return registered(['registered', 'attended']);
    case 'unpaid':
      return registered(['reserved']);
    case 'committee': {
      const holders = await Promise.all(
        (['organiser', 'reviewer'] as const).map((role) => holdersOf('event', eventId, role)),
      );
      return holders.flat().map(({ id }) => id);
    }
  }
}

/** The people of a group, each once, in the order of names; those who do not want such letters apart. */
async function readersOf(event: Event, group: LetterGroup): Promise<{ readers: Reader[]; refused: number }> {
  const talks = await talksForProgramme(event.id);
  const people = await accountsById(new Set(await membersOf(event.id, group, talks)));
  const refusals = new Set(
    (await LetterRefusalRow.findAll({ where: { eventId: event.id } })).map(({ accountId }) => accountId),
  );
  const due = await abstractsDue(event);
  const willing = [...people.values()]
    .filter(({ id }) => !refusals.has(id))
    .sort((a, b) => a.familyName.localeCompare(b.familyName, 'en'));
  const readers = willing.map((person) => ({ person, values: valuesFor(person, event, talks, due) }));
  return { readers, refused: people.size - willing.length };
}

async function abstractsDue(event: Event): Promise<string | null> {
  const row = (await deadlinesOf(event.id)).find(({ kind }) => kind === 'abstracts_due');
  if (!row) return null;
  const at = localToInstant(row.date, row.time, event.timeZone);
  return `${formatInstant(at, event.timeZone)} ${zoneName(at, event.timeZone)}`;
}

function valuesFor(
  person: PersonView,
  event: Event,
  talks: ProgrammeTalk[],
  due: string | null,
): MergeValues {
  const own = talks.filter(
    (talk) =>
      isOn(talk) && talk.people.some(({ accountId, part }) => accountId === person.id && part === 'speaker'),
  );
  return {
    name: person.printedName,
    given_name: person.givenName,
    event: event.title,
    dates: formatDateSpan(event.startsOn, event.endsOn),
    place: [event.venue, event.town].filter(Boolean).join(', '),
    talks: own.map((talk) => `“${plainLatex(talk.title).replace(/\s+/g, ' ').trim()}”`).join(', '),
    abstract_due: due,
    own_page: `${env.BASE_URL}/home`,
  };
}

/** Groups with the number of people who would be written to. */
export async function letterGroupsOf(eventId: string) {
  const event = await eventById(eventId);
  return Promise.all(
    letterGroups.map(async (group) => {
      const { readers, refused } = await readersOf(event, group);
      return { group, people: readers.length, refused };
    }),
  );
}

/** @throws 422 when a field does not exist, or has no value for one of the readers: then nobody is written to. */
function refuseUnfilled(letter: Pick<FreeLetter, 'subject' | 'text'>, readers: Reader[]): void {
  const errors: Record<string, string> = {};
  for (const part of ['subject', 'text'] as const) {
    const [unknown] = unknownFields(letter[part]);
    if (unknown !== undefined) errors[part] = `There is no field {{${unknown}}}. Choose one from the list.`;
    for (const field of new Set(readers.flatMap(({ values }) => missingFields(letter[part], values)))) {
      const without = readers.filter(({ values }) => !values[field]?.trim());
      errors[part] ??=
        `{{${field}}} (${fieldNames[field]}) is not known for ${without[0]?.person.printedName}${without.length > 1 ? ` and ${count(without.length - 1, 'other')}` : ''}.`;
    }
  }
  if (Object.keys(errors).length > 0) throw invalid(errors, 'Nobody has been written to.');
}

const write = (letter: FreeLetter, reader: Reader, event: Event) =>
  freeLetter({
    subject: merge(letter.subject, reader.values).replace(/\s+/g, ' '),
    text: merge(letter.text, reader.values),
    event,
  });

/** What a reader of the group would get. */
export async function previewLetter(
  eventId: string,
  letter: FreeLetter & { account?: string },
): Promise<LetterPreview> {
  const event = await eventById(eventId);
  const { readers } = await readersOf(event, letter.group);
  refuseUnfilled(letter, readers);
  const reader = readers.find(({ person }) => person.id === letter.account) ?? readers[0];
  return {
    people: readers.length,
    sample: reader
      ? { toName: reader.person.printedName, toAddress: reader.person.email, ...write(letter, reader, event) }
      : null,
  };
}

/** Sends the letter to the actor alone, with the data of the group's first reader. */
export async function testLetter(
  actor: Actor,
  eventId: string,
  letter: FreeLetter,
  now: Date,
): Promise<void> {
  const event = await eventById(eventId);
  const { readers } = await readersOf(event, letter.group);
  refuseUnfilled(letter, readers);
  const [reader] = readers;
  if (!reader)
    throw conflict('messages.nobody', 'Nobody is in this group, so there is no data to try it with.');
  const mail = write(letter, reader, event);
  await queueMessage({
    letter: 'messages.test',
    accountId: actor.accountId,
    eventId,
    to: { name: actor.printedName, address: actor.email },
    replyTo: event.contactEmail,
    dedupKey: `messages.test:${letter.letterId}:${actor.accountId}:${now.toISOString()}`,
    mail: { ...mail, subject: `Test: ${mail.subject}` },
  });
}

/** Writes to everybody in the group, once each, however often it is called with the same `letterId`. Returns how many people. */
export async function sendLetter(actor: Actor, eventId: string, letter: FreeLetter): Promise<number> {
  const event = await eventById(eventId);
  return transaction(async () => {
    const { readers } = await readersOf(event, letter.group);
    refuseUnfilled(letter, readers);
    if (readers.length === 0) throw conflict('messages.nobody', 'Nobody is in this group.');
    for (const reader of readers) await queueFree(reader, event, letter);
    await recordAudit({
      actor,
      action: 'messages.letter_sent',
      subject: 'letter',
      subjectId: letter.letterId,
      eventId,
      after: { group: letter.group, subject: letter.subject, people: readers.length },
    });
    return readers.length;
  });
}

async function queueFree(reader: Reader, event: Event, letter: FreeLetter): Promise<void> {
  const { id, printedName, email } = reader.person;
  const token = await issueToken({
    purpose: 'letter-refusal',
    accountId: id,
    subjectId: event.id,
    hours: 24 * 400,
  });
  await queueMessage({
    letter: 'messages.free',
    accountId: id,
    eventId: event.id,
    to: { name: printedName, address: email },
    replyTo: event.contactEmail,
    unsubscribeUrl: `${env.BASE_URL}/unsubscribe/${token}`,
    dedupKey: `messages.free:${letter.letterId}:${id}`,
    mail: write(letter, reader, event),
  });
}

/** The event of an unsubscribe link. @throws 404. */
export async function refusalOf(token: string): Promise<Event> {
  return eventById((await peekToken('letter-refusal', token)).subjectId as string);
}

/** No more letters of this event that are not owed to the person. Twice has no second effect. @throws 404. */
export async function refuseLetters(token: string): Promise<Event> {
  const event = await refusalOf(token);
  const { accountId } = await peekToken('letter-refusal', token);
  await transaction(async () => {
    const fields = { accountId, eventId: event.id };
    if (!(await LetterRefusalRow.findOne({ where: fields })))
      await LetterRefusalRow.create({ id: newId(), ...fields });
  });
  return event;
}
