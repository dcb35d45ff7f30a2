import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { instant, localDate } from '../../lib/time';
import { talkKind } from '../talks/talks.contract';
import { diet, placesSchema } from '../registration/registration.contract';

export const duty = z.object({
  /** Stable name of the kind of duty. */
  key: z.string(),
  /** By when, local date; null without one. */
  by: localDate.nullable(),
  title: z.string(),
  detail: z.string(),
  /** A verb with its object, and where it leads. */
  action: z.string(),
  href: z.string(),
  /** Due today, late, or within a week. */
  soon: z.boolean(),
});
export type Duty = z.infer<typeof duty>;

export const overviewSchema = z.object({
  duties: z.array(duty),
  places: placesSchema,
  /** Speakers, lecturers and tutors who need no place of their own. */
  speakers: z.number().int(),
  money: z.object({
    currency: z.string(),
    receivedMinor: z.number().int(),
    openMinor: z.number().int(),
    steps: z.array(z.object({ on: localDate, totalMinor: z.number().int() })),
  }),
  abstracts: z.array(z.object({ kind: talkKind, handedIn: z.number().int(), missing: z.number().int() })),
  arrivals: z.array(z.object({ on: localDate.nullable(), people: z.number().int() })),
  /** People who are expected to eat, by diet; how many allergies were noted. */
  meals: z.object({
    diets: z.array(z.object({ diet, people: z.number().int() })),
    allergies: z.number().int(),
  }),
  log: z.array(z.object({ id, at: instant, who: z.string(), what: z.string() })),
});
export type Overview = z.infer<typeof overviewSchema>;

export const readOverview = endpoint({
  id: 'runup.overview',
  method: 'GET',
  path: '/api/events/:event/overview',
  summary: 'What needs attention, places, money, abstracts, arrivals, meals and the log since yesterday.',
  params: z.object({ event: slug }),
  response: overviewSchema,
});

export const runupEndpoints = [readOverview];
