import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { draftSchema, type Draft, type DraftChange } from '@shared/features/programme/programme.contract';
import { applyChanges } from '@/features/programme/draft-changes';
import { Component } from '@/features/programme/composer.page';
import { block, item, problem, room } from '../../unit/programme/build-problem';

/** The programme page over a fake API that keeps a draft, at the width of a phone (where it is a list). */

const uuid = (n: number): string => `01890000-0000-7000-8000-${String(n).padStart(12, '0')}`;
const [cubes, squares, hall, ivar, ngo, lie] = [1, 2, 3, 4, 5, 6].map(uuid) as [
  string,
  string,
  string,
  string,
  string,
  string,
];

const card = (talkId: string, title: string, accountId: string, name: string): Draft['cards'][number] => ({
  talkId,
  kind: 'contributed',
  word: 'Contributed',
  label: `the talk by ${name}`,
  title,
  minutes: 60,
  expectedAudience: 20,
  needs: [],
  courseLetter: null,
  number: null,
  people: [{ accountId, printedName: name, shortName: name, part: 'speaker' }],
});

const place = (talkId: string, startMinute: number) => ({
  talkId,
  roomId: hall,
  day: '2026-07-06',
  startMinute,
  minutes: 60,
  fixed: false,
});

const freshDraft = (): Draft => ({
  version: 3,
  event: {
    slug: 'lattices-2026',
    title: 'Lattices',
    startsOn: '2026-07-06',
    endsOn: '2026-07-06',
    timeZone: 'Europe/Copenhagen',
  },
  problem: problem({
    days: 1,
    blocks: [block(0, '9:00', '12:00')],
    rooms: [room(hall, { name: 'Great Hall', shortName: 'G' }), room(ivar, { name: 'Ivar', shortName: 'I' })],
    items: [item(cubes, { label: 'the talk by Ngô' }), item(squares, { label: 'the talk by Lie' })],
  }),
  cards: [card(cubes, 'Cubes', ngo, 'Ngô'), card(squares, 'Squares', lie, 'Lie')],
  bands: [],
  placements: [place(cubes, 540)],
  clashes: [],
  revision: null,
  can: { change: true, publish: true },
});

let draft: Draft;
let refuse: { status: number; code: string; detail: string } | null;
const sent: { changes: DraftChange[]; version: string | null }[] = [];

function answer(body: unknown, status = 200): Response {
  const type = status >= 400 ? 'application/problem+json' : 'application/json';
  return new Response(JSON.stringify(body), { status, headers: { 'content-type': type } });
}

async function fakeApi(input: RequestInfo | URL, init?: RequestInit): Promise<Response> {
  const path = String(input);
  if (path.endsWith('/session')) return answer({ csrfToken: 'token' });
  if (init?.method === 'POST' && path.endsWith('/draft/changes')) {
    const { changes } = JSON.parse(String(init.body)) as { changes: DraftChange[] };
    sent.push({ changes, version: (init.headers as Record<string, string>)['If-Match'] ?? null });
    if (refuse) return answer({ type: 'about:blank', title: 'Refused', ...refuse }, refuse.status);
    draft = { ...draft, version: draft.version + 1, placements: applyChanges(draft.placements, changes) };
    return answer({ version: draft.version, placements: draft.placements, clashes: [] });
  }
  if (path.endsWith('/programme/draft')) return answer(draft);
  if (path.includes('/comparison'))
    return answer({ from: null, to: null, fromPublishedAt: null, changes: [], people: 0 });
  return answer({ items: [] });
}

function show(): void {
  const client = new QueryClient({ defaultOptions: { queries: { retry: false } } });
  const router = createMemoryRouter([{ path: '/organise/:event/programme', element: <Component /> }], {
    initialEntries: ['/organise/lattices-2026/programme'],
  });
  render(
    <QueryClientProvider client={client}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
}

beforeEach(() => {
  draft = freshDraft();
  refuse = null;
  sent.length = 0;
  vi.stubGlobal('fetch', vi.fn(fakeApi));
  vi.stubGlobal('matchMedia', (media: string) => ({
    media,
    matches: true,
    addEventListener: () => undefined,
    removeEventListener: () => undefined,
  }));
});

describe('the programme on a phone', () => {
  it('has a fake that keeps the contract', () => {
    expect(draftSchema.safeParse(draft).error).toBeUndefined();
  });

  it('lists what is placed and what is not', async () => {
    show();
    const day = await screen.findByRole('region', { name: 'Mon 6 July' }, { timeout: 5000 });
    expect(within(day).getByText('9:00–10:00')).toBeDefined();
    expect(within(screen.getByRole('region', { name: 'To be placed' })).getByText('Squares')).toBeDefined();
    expect(screen.getByText('No clashes.')).toBeDefined();
  });

  it('places a talk through the dialog at once, and sends the version that it saw', async () => {
    const user = userEvent.setup();
    show();
    await user.click(
      await screen.findByRole('button', { name: 'Move Contributed, Squares' }, { timeout: 5000 }),
    );
    await user.type(screen.getByLabelText('When and where'), 'mon 10:00 great');
    await user.keyboard('{Enter}');
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(sent[0]).toMatchObject({
      version: '"v3"',
      changes: [{ talkId: squares, to: { roomId: hall, day: '2026-07-06', startMinute: 600 } }],
    });
    expect(await screen.findByText('10:00–11:00')).toBeDefined();
    expect(screen.getByText(/now Mon 6 July 10:00, Great Hall. No clashes./)).toBeDefined();
  });

  it('says which word it did not understand', async () => {
    const user = userEvent.setup();
    show();
    await user.click(
      await screen.findByRole('button', { name: 'Move Contributed, Squares' }, { timeout: 5000 }),
    );
    await user.type(screen.getByLabelText('When and where'), 'atlantis');
    expect(screen.getByText('“atlantis” is neither a day, a time nor a room here.')).toBeDefined();
  });

  it('goes back to the newest state when the move is refused', async () => {
    const user = userEvent.setup();
    show();
    const row = await screen.findByRole('button', { name: /Cubes Ngô$/ }, { timeout: 5000 });
    refuse = { status: 412, code: 'stale', detail: 'Somebody else has changed this meanwhile.' };
    row.focus();
    await user.keyboard('{Alt>}{ArrowDown}{/Alt}');
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(await screen.findByText('9:00–10:00')).toBeDefined();
    expect(screen.queryByText('9:05–10:05')).toBeNull();
    expect((screen.getByRole('button', { name: 'Take back' }) as HTMLButtonElement).disabled).toBe(true);
  });

  it('shows a clash in words and settles it by its remedy', async () => {
    draft.placements = [place(cubes, 540), place(squares, 570)];
    const user = userEvent.setup();
    show();
    const clashes = await screen.findByRole('region', { name: 'Clashes' }, { timeout: 5000 });
    expect(within(clashes).getByText('Great Hall is taken twice.')).toBeDefined();
    await user.click(
      await within(clashes).findByRole('button', { name: 'Move the talk by Ngô to Ivar' }, { timeout: 5000 }),
    );
    expect(await within(clashes).findByText('No clashes.')).toBeDefined();
  });

  it('tells what went wrong when the programme can’t be read', async () => {
    vi.stubGlobal(
      'fetch',
      vi.fn(async () =>
        answer(
          { type: 'about:blank', title: 'x', status: 500, code: 'internal', detail: 'The server stumbled.' },
          500,
        ),
      ),
    );
    show();
    expect(await screen.findByText('The server stumbled.')).toBeDefined();
    expect(screen.getByRole('button', { name: 'Try again' })).toBeDefined();
  });
});
