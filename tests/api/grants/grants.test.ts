import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/grants/grants.contract';
import * as committee from '../../../shared/features/grants/grants-committee.contract';
import * as funding from '../../../shared/features/grants/grants-funder.contract';
import { trialBalance } from '../../../server/features/finance/finance-ledger.service';
import { lapseAwards } from '../../../server/features/grants/grants-decisions.service';
import { replaceDeadlines } from '../../../server/features/events/events-frame.service';
import { systemActor } from '../../../server/features/accounts/accounts.service';
import { register } from '../../../server/features/registration/registration.service';
import { actorFor, buildAccount } from '../../support/build';
import { buildApplicant, buildGrants, fundInput, grantInput } from '../../support/build-grants';
import { registrationInput } from '../../support/build-registration';
import { startTestApp, type Client, type TestApp } from '../../support/server';

let t: TestApp;
let given: Awaited<ReturnType<typeof buildGrants>>;
let organiser: Client;
let reviewer: Client;
let funder: Client;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(async () => {
  await t.reset();
  given = await buildGrants();
  organiser = await t.signIn(given.organiser);
  reviewer = await t.signIn(given.reviewer);
  funder = await t.signIn(given.funder);
});

const at = () => ({ params: { event: given.event.slug } });
const of = (application: string) => ({ params: { event: given.event.slug, application } });
const ofFund = (application: string, fund = given.fund.id) => ({
  params: { event: given.event.slug, application, fund },
});
const inFund = (award = '') => ({ params: { fund: given.fund.id, award } });
const detail = (answer: { body: unknown }) => (answer.body as { detail: string }).detail;
const fields = (answer: { body: unknown }) =>
  (answer.body as { fields?: Record<string, string> }).fields ?? {};
const travel = (amountMinor: number) => [{ kind: 'travel' as const, amountMinor }];
const pdf = Buffer.from('%PDF-1.4\n1 0 obj\n<<>>\nendobj\ntrailer\n<<>>\n%%EOF\n');
const inDays = (days: number) => new Date(Date.now() + days * 86_400_000).toISOString().slice(0, 10);

async function proposed(amountMinor = 98_000) {
  const made = await buildApplicant(given.event, given.category);
  const answer = await organiser.call(committee.proposeAward, {
    ...ofFund(made.id),
    body: { lines: travel(amountMinor), version: null },
  });
  expect(answer.status, JSON.stringify(answer.body)).toBe(200);
  return { ...made, award: answer.body.row.awards[0] as committee.BoardAward };
}

describe('H1 a grant application', () => {
  it('is saved as a draft, gets documents, is handed in, and is locked then', async () => {
    const person = await buildAccount({
      affiliation: 'Zlatna Academy',
      country: 'RS',
      careerStage: 'postdoc',
    });
    const me = await t.signIn(person);
    expect((await me.call(contract.saveMyGrant, { ...at(), version: 0, body: grantInput() })).status).toBe(
      409,
    );
    await register(await actorFor(person), given.event.slug, registrationInput(given.category), new Date());
    const empty = await me.call(contract.saveMyGrant, {
      ...at(),
      version: 0,
      body: grantInput({ motivation: 'Short', items: [] }),
    });
    expect(empty.body.application).toMatchObject({ reference: 'T27-001', state: 'draft' });
    const refused = await me.call(contract.submitMyGrant, { ...at(), version: empty.body.version, body: {} });
    expect([refused.status, fields(refused)]).toEqual([
      422,
      {
        motivation: 'Write at least 40 characters; there are 5.',
        items: 'Ask for at least one cost.',
        minUsefulMinor: 'This is more than the 0 EUR that you ask for.',
      },
    ]);
    const saved = await me.call(contract.saveMyGrant, {
      ...at(),
      version: empty.body.version,
      body: grantInput(),
    });
    expect(
      (await me.call(contract.saveMyGrant, { ...at(), version: empty.body.version, body: grantInput() }))
        .status,
    ).toBe(412);
    const withFile = await me.call(contract.addEvidence, {
      ...at(),
      body: { kind: 'travel' },
      file: { field: 'file', name: 'fare.pdf', content: pdf },
    });
    expect(withFile.body.application?.evidence).toMatchObject([
      { kind: 'travel', fileName: 'fare.pdf', type: 'application/pdf' },
    ]);
    const handed = await me.call(contract.submitMyGrant, { ...at(), version: saved.body.version, body: {} });
    expect(handed.body).toMatchObject({
      application: { state: 'submitted' },
      can: { edit: false, submit: false, withdraw: true },
    });
    expect(
      (await me.call(contract.saveMyGrant, { ...at(), version: handed.body.version, body: grantInput() }))
        .status,
    ).toBe(409);
    await t.runJobs();
    expect(t.mail.map((mail) => mail.subject)).toContain(
      'Grant application T27-001 received: Conference on Lattices',
    );
  });

  it('keeps documents behind the policy and takes no other kind of file', async () => {
    const { applicant } = await buildApplicant(given.event, given.category);
    const me = await t.signIn(applicant);
    const withdrawn = await me.call(contract.withdrawMyGrant, {
      ...at(),
      version: (await me.call(contract.readMyGrant, at())).body.version,
      body: {},
    });
    const again = await me.call(contract.saveMyGrant, {
      ...at(),
      version: withdrawn.body.version,
      body: grantInput(),
    });
    const added = await me.call(contract.addEvidence, {
      ...at(),
      body: { kind: 'travel' },
      file: { field: 'file', name: 'fare.pdf', content: pdf },
    });
    const evidence = added.body.application?.evidence[0]?.id ?? '';
    const script = await me.call(contract.addEvidence, {
      ...at(),
      body: { kind: 'travel' },
      file: { field: 'file', name: 'fare.pdf', content: Buffer.from('<script>alert(1)</script>') },
    });
    expect(script.status).toBe(415);
    const file = { params: { event: given.event.slug, evidence } };
    expect((await organiser.call(contract.downloadEvidence, file)).status).toBe(404);
    expect(
      (await me.call(contract.submitMyGrant, { ...at(), version: again.body.version, body: {} })).status,
    ).toBe(200);
    expect((await organiser.call(contract.downloadEvidence, file)).status).toBe(200);
    expect((await reviewer.call(contract.downloadEvidence, file)).headers['x-content-type-options']).toBe(
      'nosniff',
    );
    for (const other of [funder, await t.signIn(await buildAccount())])
      expect((await other.call(contract.downloadEvidence, file)).status).toBe(404);
    expect((await t.stranger.call(contract.downloadEvidence, file)).status).toBe(401);
    expect((await me.call(contract.removeEvidence, file)).status).toBe(409);
  });

  it('says who may not: 401 for nobody, 404 outside the event, 403 for a reviewer who proposes', async () => {
    const { id } = await buildApplicant(given.event, given.category);
    const other = await t.signIn(await buildAccount());
    expect((await t.stranger.call(committee.readBoard, at())).status).toBe(401);
    expect((await other.call(committee.readBoard, at())).status).toBe(404);
    expect((await funder.call(committee.readBoard, at())).status).toBe(404);
    expect(
      (
        await reviewer.call(committee.proposeAward, {
          ...ofFund(id),
          body: { lines: travel(100), version: null },
        })
      ).status,
    ).toBe(403);
    expect(
      (await reviewer.call(committee.sendDecisions, { ...at(), body: { answerBy: inDays(10) } })).status,
    ).toBe(403);
    expect((await reviewer.call(contract.createFund, { ...at(), body: fundInput() })).status).toBe(403);
  });
});

describe('H2 scores', () => {
  it('shows others’ scores after one’s own, and the mean to rank by', async () => {
    const { id } = await buildApplicant(given.event, given.category);
    expect(
      (
        await organiser.call(committee.scoreGrant, {
          ...of(id),
          body: { score: 9, comment: 'Strong', conflict: false },
        })
      ).status,
    ).toBe(200);
    const before = (await reviewer.call(committee.readGrant, of(id))).body;
    expect([before.row.score, before.reviews]).toEqual([null, null]);
    expect(
      (
        await reviewer.call(committee.scoreGrant, {
          ...of(id),
          body: { score: 11, comment: '', conflict: false },
        })
      ).status,
    ).toBe(422);
    expect(
      fields(
        await reviewer.call(committee.scoreGrant, {
          ...of(id),
          body: { score: null, comment: '', conflict: false },
        }),
      ),
    ).toEqual({ score: 'Give a score from 1 to 10, or declare a conflict of interest.' });
    await reviewer.call(committee.scoreGrant, {
      ...of(id),
      body: { score: 8, comment: '', conflict: false },
    });
    const after = (await reviewer.call(committee.readGrant, of(id))).body;
    expect([after.row.score, after.reviews]).toEqual([
      8.5,
      [{ reviewer: given.organiser.printedName, score: 9, comment: 'Strong' }],
    ]);
  });

  it('hides an application in conflict: declared, same institution, one’s own', async () => {
    const { id } = await buildApplicant(given.event, given.category);
    const near = await buildApplicant(given.event, given.category, {}, { affiliation: 'KUURA polytechnic' });
    await reviewer.call(committee.scoreGrant, {
      ...of(id),
      body: { score: null, comment: '', conflict: true },
    });
    expect((await reviewer.call(committee.readGrant, of(id))).status).toBe(404);
    expect((await reviewer.call(committee.readGrant, of(near.id))).status).toBe(404);
    expect(
      (
        await reviewer.call(committee.scoreGrant, {
          ...of(near.id),
          body: { score: 9, comment: '', conflict: false },
        })
      ).status,
    ).toBe(403);
    const board = (await reviewer.call(committee.readBoard, at())).body;
    expect(board.rows.map((row) => [row.person, row.requested, row.conflict])).toEqual([
      [null, [], 'declared'],
      [null, [], 'institution'],
    ]);
    expect(JSON.stringify(board.rows)).not.toContain('Viện');
  });
});

describe('H3 awards by hand', () => {
  it('keeps to the request, the kinds, one fund per cost and the budget, each refused with a sentence', async () => {
    const { id, award } = await proposed(90_000);
    const second = (
      await organiser.call(contract.createFund, {
        ...at(),
        body: fundInput({ name: 'First Journeys', covers: ['travel', 'fee'] }),
      })
    ).body;
    const other = await buildApplicant(given.event, given.category, {
      items: [{ kind: 'travel', amountMinor: 150_000, quantity: null, note: '' }],
    });
    const propose = (
      application: string,
      fund: string,
      lines: contract.AwardLine[],
      version: number | null = null,
    ) => organiser.call(committee.proposeAward, { ...ofFund(application, fund), body: { lines, version } });
    expect(detail(await propose(id, given.fund.id, travel(98_001), award.version))).toBe(
      'Travel: 980 EUR were asked for. Award at most that.',
    );
    expect(detail(await propose(id, second.id, travel(5_000)))).toBe(
      'Ness Bequest pays travel for this person. One cost is paid by one fund: take it back there first.',
    );
    expect(detail(await propose(id, second.id, [{ kind: 'accommodation', amountMinor: 5_000 }]))).toBe(
      'First Journeys does not pay accommodation. It pays travel and fee.',
    );
    expect(detail(await propose(other.id, given.fund.id, travel(150_000)))).toBe(
      'Ness Bequest has 1,100 EUR left. Award at most that, or choose another fund.',
    );
    expect((await propose(id, given.fund.id, travel(1_000), null)).status).toBe(412);
    const gone = await propose(id, given.fund.id, [], award.version);
    expect(gone.body.row.awards).toEqual([]);
    expect((await propose(other.id, given.fund.id, travel(150_000))).status).toBe(200);
    const late = await organiser.call(contract.updateFund, {
      params: { event: given.event.slug, fund: given.fund.id },
      version: given.fund.version,
      body: fundInput({ budgetMinor: 100_000 }),
    });
    expect(fields(late)).toEqual({
      budgetMinor: '1,500 EUR are awarded from this fund. Take awards back first, or enter at least that.',
    });
    const board = (await organiser.call(committee.readBoard, at())).body;
    expect(board.funds[0]).toMatchObject({
      letter: 'A',
      awardedMinor: 150_000,
      leftMinor: 50_000,
      awards: 1,
    });
  });

  it('gives the last euros of a fund once when forty organisers click at the same moment', async () => {
    const people: Awaited<ReturnType<typeof buildApplicant>>[] = [];
    for (let n = 0; n < 8; n++)
      people.push(
        await buildApplicant(given.event, given.category, {
          items: [{ kind: 'travel', amountMinor: 50_000, quantity: null, note: '' }],
          minUsefulMinor: 0,
        }),
      );
    const clicks = Array.from(
      { length: 40 },
      (_, n) => people[n % 8] as Awaited<ReturnType<typeof buildApplicant>>,
    );
    const answers = await Promise.all(
      clicks.map(({ id }) =>
        organiser.call(committee.proposeAward, {
          ...ofFund(id),
          body: { lines: travel(50_000), version: null },
        }),
      ),
    );
    const statuses = answers.map((answer) => answer.status);
    expect(statuses.filter((status) => status === 200)).toHaveLength(4);
    expect(new Set(statuses)).toEqual(new Set([200, 409, 412]));
    const board = (await organiser.call(committee.readBoard, at())).body;
    expect(board.funds[0]).toMatchObject({ awardedMinor: 200_000, leftMinor: 0, awards: 4 });
    expect(board.rows.filter((row) => row.awards.length === 0).map((row) => row.reason)).toEqual(
      Array(4).fill(null),
    );
    await organiser.call(committee.scoreGrant, {
      ...of(board.rows.find((row) => row.awards.length === 0)?.id ?? ''),
      body: { score: 7, comment: '', conflict: false },
    });
    expect((await organiser.call(committee.readBoard, at())).body.rows.map((row) => row.reason)).toContain(
      'No fund has enough left: A 0.',
    );
  });
});

describe('H5 the funder', () => {
  it('sees reference, stage and region, and nothing else of a person', async () => {
    await proposed();
    const view = (await funder.call(funding.readFund, inFund())).body;
    expect(Object.keys(view.awards[0] ?? {}).sort()).toEqual([
      'awardMinor',
      'can',
      'id',
      'lines',
      'reference',
      'region',
      'requested',
      'requestedMinor',
      'score',
      'stage',
      'state',
      'talk',
      'version',
    ]);
    expect(view.awards[0]).toMatchObject({
      reference: 'T27-001',
      stage: 'doctoral',
      region: 'South-eastern Asia',
      awardMinor: 98_000,
    });
    const text = JSON.stringify(view);
    for (const secret of [
      'Given',
      'Family',
      '@example.org',
      'Viện',
      '"VN"',
      'vegetarian',
      'lattices and would',
    ])
      expect(text).not.toContain(secret);
    const other = await t.signIn(
      await buildAccount({}, [
        {
          role: 'funder',
          scope: 'fund',
          scopeId: (
            await organiser.call(contract.createFund, { ...at(), body: fundInput({ name: 'Second' }) })
          ).body.id,
        },
      ]),
    );
    expect((await other.call(funding.readFund, inFund())).status).toBe(404);
    expect((await organiser.call(funding.readFund, inFund())).status).toBe(404);
    expect((await t.stranger.call(funding.readFund, inFund())).status).toBe(401);
  });

  it('queries, is answered, approves, undoes; a stale click changes nothing', async () => {
    const { award, id } = await proposed();
    const decide = (version: number, decision: 'approved' | 'queried' | 'proposed', question = '') =>
      funder.call(funding.decideAward, { ...inFund(award.id), version, body: { decision, question } });
    expect(fields(await decide(award.version, 'queried'))).toEqual({ question: 'Write your question.' });
    const queried = await decide(award.version, 'queried', 'Where will this person stay?');
    expect(queried.body).toMatchObject({
      state: 'queried',
      talk: [{ from: 'funder', text: 'Where will this person stay?' }],
    });
    expect((await decide(award.version, 'approved')).status).toBe(412);
    await t.runJobs();
    expect(t.mail.find((mail) => mail.to === given.organiser.email)?.subject).toBe(
      'Question about T27-001 from Ness Bequest',
    );
    const answered = await organiser.call(committee.answerQuery, {
      params: { event: given.event.slug, award: award.id },
      version: queried.body.version,
      body: { text: 'With a colleague.' },
    });
    expect(answered.body.row.awards[0]?.state).toBe('proposed');
    const approved = await decide(answered.body.row.awards[0]?.version ?? -1, 'approved');
    expect(approved.body.state).toBe('approved');
    expect(
      detail(
        await organiser.call(committee.proposeAward, {
          ...ofFund(id),
          body: { lines: travel(1), version: approved.body.version },
        }),
      ),
    ).toContain('has approved this award');
    expect((await decide(approved.body.version, 'proposed')).body).toMatchObject({
      state: 'proposed',
      can: { approve: true, undo: false },
    });
    const other = await organiser.call(contract.createFund, { ...at(), body: fundInput({ name: 'Second' }) });
    const client = await t.signIn(
      await buildAccount({}, [{ role: 'funder', scope: 'fund', scopeId: other.body.id }]),
    );
    expect(
      (
        await client.call(funding.decideAward, {
          params: { fund: other.body.id, award: award.id },
          version: 3,
          body: { decision: 'approved', question: '' },
        })
      ).status,
    ).toBe(404);
  });

  it('approves the remaining as they were read, or none', async () => {
    const one = await proposed(50_000);
    const two = await proposed(60_000);
    const awards = [one, two].map(({ award }) => ({ id: award.id, version: award.version }));
    const stale = await funder.call(funding.approveAwards, {
      ...inFund(),
      body: { awards: [awards[0], { ...awards[1], version: 9 }] },
    });
    expect(stale.status).toBe(412);
    expect((await funder.call(funding.readFund, inFund())).body.awards.map((award) => award.state)).toEqual([
      'proposed',
      'proposed',
    ]);
    const all = await funder.call(funding.approveAwards, { ...inFund(), body: { awards } });
    expect(all.body.awards.map((award) => award.state)).toEqual(['approved', 'approved']);
    expect(all.body.conditions.every((condition) => condition.met)).toBe(true);
  });
});

describe('H6 decisions', () => {
  it('offers, regrets and holds; the person accepts, gives back, and the fund has its money again', async () => {
    const { applicant, award } = await proposed();
    const poor = await buildApplicant(given.event, given.category);
    await funder.call(funding.decideAward, {
      ...inFund(award.id),
      version: award.version,
      body: { decision: 'approved', question: '' },
    });
    const held = await proposed(1_000);
    const me = await t.signIn(applicant);
    expect((await me.call(contract.readMyGrant, at())).body.decision).toBeNull();
    expect(
      fields(await organiser.call(committee.sendDecisions, { ...at(), body: { answerBy: inDays(-1) } })),
    ).toEqual({ answerBy: 'Choose a day after today.' });
    const sent = await organiser.call(committee.sendDecisions, { ...at(), body: { answerBy: inDays(14) } });
    expect(sent.body).toEqual({ offered: 1, notAwarded: 1, held: 1 });
    expect(
      (await organiser.call(committee.sendDecisions, { ...at(), body: { answerBy: inDays(14) } })).status,
    ).toBe(409);
    await t.runJobs();
    const letters = (to: string) =>
      t.mail
        .filter((mail) => mail.to === to)
        .map((mail) => mail.subject)
        .slice(1);
    expect([letters(applicant.email), letters(poor.applicant.email), letters(held.applicant.email)]).toEqual([
      ['A travel grant for you: Conference on Lattices'],
      ['About your grant application: Conference on Lattices'],
      [],
    ]);
    const mine = (await me.call(contract.readMyGrant, at())).body;
    expect(mine.decision).toMatchObject({
      outcome: 'offered',
      totalMinor: 98_000,
      lines: [{ kind: 'travel', fund: 'Ness Bequest' }],
    });
    const accepted = await me.call(contract.answerAward, {
      ...at(),
      version: mine.version,
      body: { answer: 'accepted' },
    });
    expect(accepted.body.decision?.outcome).toBe('accepted');
    expect(
      (await me.call(contract.answerAward, { ...at(), version: mine.version, body: { answer: 'returned' } }))
        .status,
    ).toBe(412);
    const returned = await me.call(contract.answerAward, {
      ...at(),
      version: accepted.body.version,
      body: { answer: 'returned' },
    });
    expect(returned.body.decision?.outcome).toBe('returned');
    expect((await organiser.call(committee.readBoard, at())).body.funds[0]).toMatchObject({
      awardedMinor: 1_000,
      leftMinor: 199_000,
    });
    const ledger = (await trialBalance()).filter((line) => line.account.startsWith('grant'));
    expect(ledger.map((line) => [line.account.split(':')[0], line.debitMinor, line.creditMinor])).toEqual([
      ['grant commitments', 98_000, 98_000],
      ['grant expense', 98_000, 98_000],
    ]);
  });

  it('sends nothing while applications can still come in, and keeps the date for them', async () => {
    const { award } = await proposed();
    await funder.call(funding.decideAward, {
      ...inFund(award.id),
      version: award.version,
      body: { decision: 'approved', question: '' },
    });
    const due = (days: number) =>
      replaceDeadlines(systemActor, given.event.slug, given.event.version, [
        { kind: 'grants_due', date: inDays(days), time: '23:59' },
      ]);
    const moved = await due(5);
    const early = await organiser.call(committee.sendDecisions, { ...at(), body: { answerBy: inDays(14) } });
    expect([early.status, detail(early)]).toEqual([
      409,
      'Applications can still come in. Letters go after the date for grant applications.',
    ]);
    await replaceDeadlines(systemActor, given.event.slug, moved.version, [
      { kind: 'grants_due', date: inDays(-5), time: '23:59' },
    ]);
    const person = await buildAccount({ affiliation: 'Zlatna Academy' });
    await register(await actorFor(person), given.event.slug, registrationInput(given.category), new Date());
    const me = await t.signIn(person);
    expect(detail(await me.call(contract.saveMyGrant, { ...at(), version: 0, body: grantInput() }))).toBe(
      'The date for grant applications is past.',
    );
    expect(
      (await organiser.call(committee.sendDecisions, { ...at(), body: { answerBy: inDays(14) } })).body,
    ).toMatchObject({ offered: 1 });
  });

  it('gives an offer that was not answered in time back to its fund, and says so', async () => {
    const { applicant, award } = await proposed();
    await funder.call(funding.decideAward, {
      ...inFund(award.id),
      version: award.version,
      body: { decision: 'approved', question: '' },
    });
    await organiser.call(committee.sendDecisions, { ...at(), body: { answerBy: inDays(3) } });
    expect(await lapseAwards(new Date(Date.now() + 2 * 86_400_000))).toBe(0);
    expect(await lapseAwards(new Date(Date.now() + 5 * 86_400_000))).toBe(1);
    expect(await lapseAwards(new Date(Date.now() + 5 * 86_400_000))).toBe(0);
    await t.runJobs();
    expect(t.mail.filter((mail) => mail.to === applicant.email).at(-1)?.subject).toBe(
      'Grant offer out of date: Conference on Lattices',
    );
    const me = await t.signIn(applicant);
    const mine = (await me.call(contract.readMyGrant, at())).body;
    expect([mine.decision?.outcome, mine.can.accept, mine.can.return]).toEqual(['returned', false, false]);
    expect((await organiser.call(committee.readBoard, at())).body.funds[0]?.leftMinor).toBe(200_000);
  });
});

describe('H3 funds', () => {
  it('are changed by organisers of their event only, with the version that was read', async () => {
    const change = (client: Client, event: string, version: number, over = {}) =>
      client.call(contract.updateFund, {
        params: { event, fund: given.fund.id },
        version,
        body: fundInput({ name: 'Ness Gift', ...over }),
      });
    expect((await change(organiser, given.event.slug, given.fund.version)).body).toMatchObject({
      name: 'Ness Gift',
      funders: [given.funder.printedName],
      can: { edit: true, inviteFunder: false },
    });
    expect((await change(organiser, given.event.slug, given.fund.version)).status).toBe(412);
    expect((await change(funder, given.event.slug, 1)).status).toBe(404);
    expect((await change(reviewer, given.event.slug, 1)).status).toBe(403);
    expect(fields(await change(organiser, given.event.slug, 1, { currency: 'JPY' }))).toEqual({
      currency: 'The event is reckoned in EUR. Enter the budget in that currency.',
    });
    const other = await buildGrants();
    const stranger = await t.signIn(other.organiser);
    expect((await change(stranger, other.event.slug, 1)).status).toBe(404);
    expect((await change(stranger, given.event.slug, 1)).status).toBe(404);
  });
});
