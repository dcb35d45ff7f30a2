import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { letterGroups } from './letter.rules';

const inEvent = z.object({ event: slug });
const line = z
  .string()
  .trim()
  .max(200)
  .refine((text) => !/[\r\n]/.test(text), 'One line only.');

export const freeLetter = z.strictObject({
  /** Made once when the form is opened: the same letter is never sent twice to one person, however often it is pressed. */
  letterId: z.uuid(),
  group: z.enum(letterGroups),
  /** May hold fields such as {{name}}. */
  subject: line.min(1, 'A letter needs a subject.'),
  /** Paragraphs are parted by an empty line. May hold fields. */
  text: z.string().trim().min(1, 'Write something.').max(10_000),
});
export type FreeLetter = z.infer<typeof freeLetter>;

export const letterGroupList = z.object({
  items: z.array(
    z.object({
      group: z.enum(letterGroups),
      /** People who would get it. */
      people: z.number().int(),
      /** People of the group who do not want such letters; they get none. */
      refused: z.number().int(),
    }),
  ),
});
export const letterPreview = z.object({
  /** People who would get it. */
  people: z.number().int(),
  /** What one of them would read; null when the group is empty. */
  sample: z
    .object({
      toName: z.string(),
      toAddress: z.string(),
      subject: z.string(),
      text: z.string(),
      html: z.string(),
    })
    .nullable(),
});
export type LetterPreview = z.infer<typeof letterPreview>;

export const listLetterGroups = endpoint({
  id: 'messages.groups',
  method: 'GET',
  path: '/api/events/:event/letter-groups',
  summary: 'Groups of an event to whom one can write, with their sizes.',
  params: inEvent,
  response: letterGroupList,
});
export const previewLetter = endpoint({
  id: 'messages.preview',
  method: 'POST',
  path: '/api/events/:event/letters/preview',
  summary: 'A letter with a real reader’s data; nothing is sent.',
  params: inEvent,
  body: freeLetter.extend({ /** Whose data; the first of the group unless given. */ account: id.optional() }),
  response: letterPreview,
});
export const testLetter = endpoint({
  id: 'messages.test_letter',
  method: 'POST',
  path: '/api/events/:event/letters/test',
  summary: 'Send a letter, with a real reader’s data, to oneself only.',
  params: inEvent,
  body: freeLetter,
  response: 'empty',
});
export const sendLetter = endpoint({
  id: 'messages.send_letter',
  method: 'POST',
  path: '/api/events/:event/letters',
  summary: 'Send a letter to a group; refused as a whole when a field has no value for somebody.',
  params: inEvent,
  body: freeLetter,
  response: z.object({ /** People written to, also when it was pressed before. */ people: z.number().int() }),
});

export const letterEndpoints = [listLetterGroups, previewLetter, testLetter, sendLetter];
