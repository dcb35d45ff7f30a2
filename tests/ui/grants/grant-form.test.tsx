import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { myGrant, type GrantInput, type MyGrant } from '@shared/features/grants/grants.contract';
import { Component } from '@/features/grants/grant.page';

/** One's own grant application over a fake API that keeps one draft and refuses stale saves, as the server does. */
let mine: MyGrant;
const sent: string[] = [];
let refuse: Record<string, string> | null;
const answer = (body: unknown, status = 200) =>
  new Response(JSON.stringify(body), {
    status,
    headers: { 'content-type': status >= 400 ? 'application/problem+json' : 'application/json' },
  });

async function fakeApi(input: RequestInfo | URL, init?: RequestInit): Promise<Response> {
  const path = String(input);
  if (path.endsWith('/session')) return answer({ csrfToken: 'token' });
  if (!init?.method || init.method === 'GET') return answer(myGrant.parse(mine));
  const version = new Headers(init.headers).get('if-match');
  sent.push(`${init.method} ${path.split('/').pop()} ${version}`);
  await new Promise((resolve) => setTimeout(resolve, 20));
  if (version !== `"v${mine.version}"`)
    return answer({ status: 412, code: 'stale', detail: 'Somebody else has changed this meanwhile.' }, 412);
  if (refuse && path.endsWith('submission'))
    return answer(
      { status: 422, code: 'invalid', detail: 'Some fields need another look.', fields: refuse },
      422,
    );
  const submitted = path.endsWith('submission');
  const written = submitted
    ? (mine.application as NonNullable<MyGrant['application']>).input
    : (JSON.parse(String(init.body)) as GrantInput);
  mine = {
    ...mine,
    version: mine.version + 1,
    can: { ...mine.can, edit: !submitted, submit: !submitted, withdraw: true },
    application: {
      reference: 'T27-001',
      state: submitted ? 'submitted' : 'draft',
      input: written,
      evidence: [],
      submittedAt: submitted ? '2027-01-01T10:00:00.000Z' : null,
      savedAt: '2027-01-01T10:00:00.000Z',
    },
  };
  return answer(mine);
}

function open() {
  const router = createMemoryRouter([{ path: '/events/:event/grant', element: <Component /> }], {
    initialEntries: ['/events/lattices/grant'],
  });
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return userEvent.setup();
}

beforeEach(() => {
  sent.length = 0;
  refuse = null;
  vi.stubGlobal('fetch', fakeApi);
  vi.stubGlobal('scrollTo', () => undefined);
  mine = {
    eventTitle: 'Conference on Lattices',
    eventSlug: 'lattices',
    startsOn: '2027-07-05',
    endsOn: '2027-07-07',
    currency: 'EUR',
    timeZone: 'Europe/Copenhagen',
    dueAt: '2027-04-30T21:59:00.000Z',
    closedBecause: null,
    basis: 'registration',
    coveredKinds: ['travel', 'accommodation'],
    talks: [],
    profile: {
      printedName: 'Mira Ås',
      affiliation: 'Norrhamn University',
      country: 'NO',
      careerStage: 'doctoral',
    },
    application: null,
    decision: null,
    can: { edit: true, submit: false, withdraw: false, accept: false, return: false },
    version: 0,
  };
});
afterEach(() => vi.unstubAllGlobals());

describe('H1 one’s own application on screen', () => {
  it('names the date in the institute’s zone and what no fund pays', async () => {
    open();
    expect(await screen.findByText('Fri 30 April 2027, 23:59')).toBeDefined();
    expect(screen.getByText('Subsistence: no fund of this event pays it.')).toBeDefined();
  });

  it('saves when a field is left, one save after the other, and keeps what is typed meanwhile', async () => {
    const user = open();
    await user.type(await screen.findByLabelText('Travel'), '980.50');
    await user.type(
      screen.getByLabelText('Why this event, and why a grant'),
      'To meet the three people whom I cite most often.',
    );
    await user.click(screen.getByRole('button', { name: 'Hand in the application' }));
    await screen.findByText(/Handed in on/);
    expect(sent).toEqual(['PUT my-grant "v0"', 'PUT my-grant "v1"', 'POST submission "v2"']);
    expect(mine.application?.input).toMatchObject({
      motivation: 'To meet the three people whom I cite most often.',
      items: [{ kind: 'travel', amountMinor: 98_050 }],
    });
  });

  it('puts the server’s refusals beside their fields and throws nothing away', async () => {
    const user = open();
    await user.type(await screen.findByLabelText('Accommodation'), '400');
    refuse = {
      'items.0.quantity': 'Say how many nights.',
      motivation: 'Write at least 40 characters; there are 0.',
    };
    await user.click(screen.getByRole('button', { name: 'Hand in the application' }));
    const nights = screen.getByLabelText('Nights');
    await waitFor(() => expect(nights.getAttribute('aria-invalid')).toBe('true'));
    expect(
      document.getElementById(nights.getAttribute('aria-describedby')?.split(' ').pop() ?? '')?.textContent,
    ).toBe('Say how many nights.');
    expect((screen.getByLabelText('Accommodation') as HTMLInputElement).value).toBe('400');
  });

  it('does not send a sum that can’t be read', async () => {
    const user = open();
    await user.type(await screen.findByLabelText('Travel'), 'about 500');
    await user.click(screen.getByRole('button', { name: 'Save the draft' }));
    expect(await screen.findByText('Write a sum like 980 or 980.50.')).toBeDefined();
    expect(sent).toEqual([]);
  });
});
