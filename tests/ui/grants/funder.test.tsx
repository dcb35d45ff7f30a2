import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import {
  funderView,
  type FunderAward,
  type FunderView,
} from '@shared/features/grants/grants-funder.contract';
import { Component } from '@/features/grants/funder.page';

/** The funder's page over a fake API that keeps the awards of one fund, as the contract describes them. */
const uuid = (n: number): string => `01890000-0000-7000-8000-${String(n).padStart(12, '0')}`;
const award = (n: number, over: Partial<FunderAward> = {}): FunderAward => ({
  id: uuid(n),
  reference: `T27-00${n}`,
  stage: 'doctoral',
  region: 'South-eastern Asia',
  score: 9.4,
  requested: [{ kind: 'travel', amountMinor: 98_000 }],
  requestedMinor: 98_000,
  lines: [{ kind: 'travel', amountMinor: 90_000 }],
  awardMinor: 90_000,
  state: 'proposed',
  talk: [],
  can: { approve: true, query: true, undo: false },
  version: 0,
  ...over,
});

let view: FunderView;
let failing: { status: number; code: string; detail: string } | null;
const sent: { path: string; body: unknown; version: string | null }[] = [];
const answer = (body: unknown, status = 200) =>
  new Response(JSON.stringify(body), {
    status,
    headers: { 'content-type': status >= 400 ? 'application/problem+json' : 'application/json' },
  });

async function fakeApi(input: RequestInfo | URL, init?: RequestInit): Promise<Response> {
  const path = String(input);
  if (path.endsWith('/session')) return answer({ csrfToken: 'token' });
  if (!init?.method || init.method === 'GET')
    return failing ? answer(failing, failing.status) : answer(funderView.parse(view));
  const body = JSON.parse(String(init.body)) as {
    decision?: FunderAward['state'];
    question?: string;
    awards?: { id: string }[];
  };
  sent.push({ path, body, version: new Headers(init.headers).get('if-match') });
  if (failing) return answer(failing, failing.status);
  const change = (row: FunderAward, state: FunderAward['state']): FunderAward => ({
    ...row,
    state,
    version: row.version + 1,
    can: { approve: state !== 'approved', query: true, undo: state !== 'proposed' },
    talk: body.question
      ? [...row.talk, { from: 'funder', text: body.question, at: '2027-01-01T10:00:00.000Z' }]
      : row.talk,
  });
  const wanted = new Set(body.awards?.map((row) => row.id) ?? [path.split('/')[5]]);
  view = {
    ...view,
    awards: view.awards.map((row) => (wanted.has(row.id) ? change(row, body.decision ?? 'approved') : row)),
  };
  return answer(body.awards ? view : view.awards.find((row) => wanted.has(row.id)));
}

function open() {
  const router = createMemoryRouter([{ path: '/funds/:fund', element: <Component /> }], {
    initialEntries: [`/funds/${uuid(99)}`],
  });
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return userEvent.setup();
}
const row = (reference: string) => within(screen.getByRole('row', { name: new RegExp(reference) }));

beforeEach(() => {
  failing = null;
  sent.length = 0;
  vi.stubGlobal('fetch', fakeApi);
  view = {
    id: uuid(99),
    name: 'Ness Bequest',
    funder: 'Ness Trust',
    instituteName: 'Tarnholt Institute',
    eventTitle: 'Conference on Lattices',
    startsOn: '2027-07-05',
    endsOn: '2027-07-07',
    timeZone: 'Europe/Copenhagen',
    town: 'Tarnholt',
    contactEmail: 'lattices@tarnholt.example.org',
    currency: 'EUR',
    budgetMinor: 300_000,
    awardedMinor: 270_000,
    decideBy: '2027-04-30T16:00:00.000Z',
    showScores: true,
    conditions: [
      { text: 'No award above 1,500 EUR', met: true, fact: null },
      { text: 'At least 50 % of what is awarded to: student', met: false, fact: '0 of 2,700' },
    ],
    awards: [award(1), award(2), award(3)],
  };
});
afterEach(() => vi.unstubAllGlobals());

describe('H5 the funder’s page', () => {
  it('is a letter with sum, date in the institute’s zone and conditions, met or not in words', async () => {
    open();
    const letter = within(await screen.findByRole('region', { name: 'Letter' }));
    expect(letter.getByRole('heading', { level: 1 }).textContent).toBe('Awards proposed to Ness Bequest');
    expect(letter.getByText(/The committee proposes/).textContent).toBe(
      'The committee proposes 3 awards, together 2,700 EUR of the 3,000 EUR you granted. Please approve or query each by Fri 30 April, 18:00 (Tarnholt).',
    );
    expect(letter.getByText('(not met yet)')).toBeDefined();
    expect(letter.getAllByRole('img', { name: 'Met' })).toHaveLength(1);
  });

  it('approves a row and takes it back, with the version that was read', async () => {
    const user = open();
    await user.click(await screen.findByRole('button', { name: 'Approve T27-001' }));
    expect(await row('T27-001').findByText('Approved')).toBeDefined();
    expect(sent[0]).toMatchObject({
      path: `/api/funds/${uuid(99)}/awards/${uuid(1)}/decision`,
      version: '"v0"',
      body: { decision: 'approved' },
    });
    await user.click(row('T27-001').getByRole('button', { name: 'Undo the decision on T27-001' }));
    expect(await row('T27-001').findByRole('button', { name: 'Approve T27-001' })).toBeDefined();
    expect(sent[1]?.version).toBe('"v1"');
  });

  it('writes the question in the row; discarding sends nothing', async () => {
    const user = open();
    await user.click(await screen.findByRole('button', { name: 'Query T27-002' }));
    await user.click(screen.getByRole('button', { name: 'Discard' }));
    expect(sent).toEqual([]);
    await user.click(screen.getByRole('button', { name: 'Query T27-002' }));
    const field = screen.getByLabelText(/Your question on T27-002/);
    expect(document.activeElement).toBe(field);
    await user.type(field, 'Where will this person stay?{Enter}');
    expect(await row('T27-002').findByText('Query open')).toBeDefined();
    expect(screen.getByText('Where will this person stay?')).toBeDefined();
    expect(screen.getByRole('button', { name: 'Approve the remaining 2…' })).toBeDefined();
  });

  it('approves the remaining after naming number and sum; the safe button has the focus', async () => {
    const user = open();
    await user.click(await screen.findByRole('button', { name: 'Approve the remaining 3…' }));
    const dialog = within(screen.getByRole('dialog', { name: 'Approve 3 awards' }));
    expect(dialog.getByText(/Together 2,700 EUR: T27-001, T27-002, T27-003/)).toBeDefined();
    expect(document.activeElement?.textContent).toBe('Leave them open');
    await user.click(dialog.getByRole('button', { name: 'Approve 3 awards' }));
    expect(await screen.findAllByText('Approved')).toHaveLength(3);
    expect((sent[0]?.body as { awards: unknown[] }).awards).toHaveLength(3);
  });

  it('says what is wrong when it can’t be read, and when nothing is proposed', async () => {
    failing = { status: 404, code: 'not_found', detail: 'This fund does not exist, or is not yours to see.' };
    open();
    expect((await screen.findByRole('alert')).textContent).toContain(
      'This fund does not exist, or is not yours to see.',
    );
    failing = null;
    view = { ...view, awards: [] };
    await userEvent.setup().click(screen.getByRole('button', { name: 'Try again' }));
    expect(await screen.findByText('No awards are proposed to this fund yet.')).toBeDefined();
  });
});
