import type { AnyEndpoint } from '../../shared/http/endpoint';
import { beforeAll, describe, expect, it } from 'vitest';
import { contracts } from '../../shared/contracts';
import { newId } from '../../server/db/id';
import { createFund } from '../../server/features/grants/grants-funds.service';
import { systemActor, type PersonView } from '../../server/features/accounts/accounts.service';
import { register } from '../../server/features/registration/registration.service';
import { actorFor, buildAccount } from '../support/build';
import { buildEvent } from '../support/build-events';
import { buildGrants, fundInput } from '../support/build-grants';
import { buildTalk } from '../support/build-programme';
import { registrationInput } from '../support/build-registration';
import { startTestApp, type Client, type TestApp } from '../support/server';
import { actors, table, type ActorName, type Expected } from './roles';

/** The doors' own answers; what is behind a door says what exactly does not exist. */
const DOOR_SAYS = [
  'This page or record does not exist, or is not yours to see.',
  'This does not exist, or is not yours to see.',
];

let app: TestApp;
const clients = {} as Record<ActorName, Client>;
const params: Record<string, string | number> = {};

async function people(
  event: { id: string; slug: string },
  elsewhere: { id: string },
  fundElsewhere: string,
): Promise<
  Record<
    | 'administrator'
    | 'finance'
    | 'organiserElsewhere'
    | 'desk'
    | 'funderElsewhere'
    | 'speaker'
    | 'participant'
    | 'plain',
    PersonView
  >
> {
  const inEvent = (role: 'organiser' | 'desk', id: string) =>
    buildAccount({}, [{ role, scope: 'event', scopeId: id }]);
  return {
    administrator: await buildAccount({}, [{ role: 'administrator' }]),
    finance: await buildAccount({}, [{ role: 'finance' }]),
    organiserElsewhere: await inEvent('organiser', elsewhere.id),
    desk: await inEvent('desk', event.id),
    funderElsewhere: await buildAccount({}, [{ role: 'funder', scope: 'fund', scopeId: fundElsewhere }]),
    speaker: await buildAccount(),
    participant: await buildAccount(),
    plain: await buildAccount(),
  };
}

/** One event with everybody who can have to do with it, and another event with an organiser and a funder of its own. */
beforeAll(async () => {
  app = await startTestApp();
  const { event, category, fund, organiser, reviewer, funder } = await buildGrants();
  const elsewhere = await buildEvent();
  const fundElsewhere = await createFund(systemActor, elsewhere.slug, fundInput({ name: 'Varde Fund' }));
  const cast = { ...(await people(event, elsewhere, fundElsewhere.id)), organiser, reviewer, funder };
  const talk = await buildTalk(event.id, { speaker: cast.speaker });
  const registration = await register(
    await actorFor(cast.participant),
    event.slug,
    registrationInput(category),
    new Date(),
  );
  Object.assign(params, {
    event: event.slug,
    fund: fund.id,
    talk: talk.id,
    registration: registration.id,
    number: 1,
    index: 0,
    token: 'a'.repeat(43),
    mail: newId(),
  });
  for (const [name, person] of Object.entries(cast)) clients[name as ActorName] = await app.signIn(person);
  clients.stranger = app.stranger;
}, 60_000);

const paramsOf = (endpoint: AnyEndpoint): Record<string, unknown> =>
  Object.fromEntries(
    [...endpoint.path.matchAll(/:([A-Za-z]+)/g)].map(([, name]) => [name, params[name as string] ?? newId()]),
  );

/** Bodies hold a field that no contract has: a door that lets through refuses them with 422 and changes nothing. */
async function knock(endpoint: AnyEndpoint, actor: ActorName): Promise<Expected> {
  const body =
    endpoint.method === 'GET' || endpoint.method === 'DELETE' ? undefined : { surely_not_a_field: 1 };
  const answer = await clients[actor].call(endpoint, { params: paramsOf(endpoint) as never, body });
  const { code, detail } = answer.body as { code?: string; detail?: string };
  if (answer.status === 401 && code === 'unauthenticated') return 401;
  if (answer.status === 403 && code === 'forbidden') return 403;
  if (answer.status === 404 && (DOOR_SAYS.includes(detail ?? '') || endpoint.id === 'talks.read')) return 404;
  expect(answer.status, `${endpoint.id} as ${actor}: ${JSON.stringify(answer.body)}`).toBeLessThan(500);
  return 'in';
}

describe('doors', () => {
  it('the table has a row for every operation, and no other', () => {
    expect(Object.keys(table).sort()).toEqual(contracts.map((endpoint) => endpoint.id).sort());
  });

  // Signing out comes last: it would close the door behind the actor.
  const inTurn = [...contracts].sort(
    (a, b) => Number(a.id === 'accounts.sign_out') - Number(b.id === 'accounts.sign_out'),
  );
  it.each(inTurn.map((endpoint) => [endpoint.id, endpoint] as const))('%s', async (id, endpoint) => {
    const answers: Record<string, Expected> = {};
    for (const actor of actors) answers[actor] = await knock(endpoint, actor);
    expect(answers).toEqual(table[id]);
  });
});
