import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/events/events.contract';
import { administrator, buildAccount } from '../../support/build';
import { buildEvent, eventInput } from '../../support/build-events';
import { startTestApp, type TestApp } from '../../support/server';

let t: TestApp;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(() => t.reset());

const fields = (answer: { body: unknown }): Record<string, string> =>
  (answer.body as { fields: Record<string, string> }).fields;

describe('B2 events', () => {
  it('the office creates a draft, which only its team sees', async () => {
    const office = await t.signIn(await buildAccount({}, [administrator]));
    const created = await office.call(contract.createEvent, { body: eventInput() });
    expect(created.body).toMatchObject({ slug: 'lattices-2027', state: 'draft', version: 0 });
    const other = await t.signIn(await buildAccount());
    expect((await other.call(contract.readEvent, { params: { event: 'lattices-2027' } })).status).toBe(404);
    expect((await other.call(contract.createEvent, { body: eventInput() })).status).toBe(403);
    const again = await office.call(contract.createEvent, { body: eventInput() });
    expect(again.body.slug).toBe('lattices-2027-2');
  });

  it('says beside the field what is wrong', async () => {
    const office = await t.signIn(await buildAccount({}, [administrator]));
    const wrong = await office.call(contract.createEvent, {
      body: { ...eventInput({ endsOn: '2027-07-01' }), title: '', timeZone: 'Mars/Base' },
    });
    expect(wrong.status).toBe(422);
    expect(fields(wrong)).toMatchObject({
      title: 'This is needed.',
      timeZone: expect.stringContaining('not known') as string,
    });
    const backwards = await office.call(contract.createEvent, { body: eventInput({ endsOn: '2027-07-01' }) });
    expect(fields(backwards)).toEqual({ endsOn: 'The last day is before the first.' });
    const extra = await office.call(contract.createEvent, { body: { ...eventInput(), colour: 'red' } });
    expect(fields(extra)).toEqual({ colour: 'This field is not known here.' });
  });

  it('an organiser edits her own event only, and a stale version is refused', async () => {
    const event = await buildEvent();
    const elsewhere = await buildEvent();
    const organiser = await t.signIn(
      await buildAccount({}, [{ role: 'organiser', scope: 'event', scopeId: event.id }]),
    );
    const change = { params: { event: event.slug }, body: eventInput({ title: 'New title' }) };
    const saved = await organiser.call(contract.updateEvent, { ...change, version: event.version });
    expect(saved.body).toMatchObject({ title: 'New title', version: event.version + 1 });
    expect((await organiser.call(contract.updateEvent, { ...change, version: event.version })).status).toBe(
      412,
    );
    expect(
      (
        await organiser.call(contract.updateEvent, {
          ...change,
          params: { event: elsewhere.slug },
          version: elsewhere.version,
        })
      ).status,
    ).toBe(404);
    const desk = await t.signIn(
      await buildAccount({}, [{ role: 'desk', scope: 'event', scopeId: event.id }]),
    );
    expect((await desk.call(contract.updateEvent, { ...change, version: 1 })).status).toBe(403);
    expect((await desk.call(contract.readEvent, { params: { event: event.slug } })).body.can).toEqual({
      edit: false,
      announce: false,
      manageRoles: false,
    });
  });

  it('goes along its states and says what is missing', async () => {
    const event = await buildEvent(
      { texts: { lead: '', practical: '', travel: '', safeguarding: '' } },
      'draft',
    );
    const office = await t.signIn(await buildAccount({}, [administrator]));
    const at = { params: { event: event.slug } };
    const early = await office.call(contract.changeEventState, {
      ...at,
      body: { to: 'announced' },
      version: event.version,
    });
    expect(early.status).toBe(409);
    expect((early.body as unknown as { detail: string }).detail).toBe(
      'Write the paragraph for the public page.',
    );
    const skipped = await office.call(contract.changeEventState, {
      ...at,
      body: { to: 'running' },
      version: event.version,
    });
    expect(skipped.status).toBe(409);
  });

  it('keeps day frames without overlaps and inside the event', async () => {
    const event = await buildEvent();
    const office = await t.signIn(await buildAccount({}, [administrator]));
    const block = {
      day: '2027-07-05',
      startsAt: '09:00',
      endsAt: '10:00',
      kind: 'session' as const,
      title: '',
      minimalMinutes: null,
    };
    const answer = await office.call(contract.replaceDayFrames, {
      params: { event: event.slug },
      version: event.version,
      body: {
        blocks: [block, { ...block, startsAt: '09:30', endsAt: '10:30' }, { ...block, day: '2027-08-01' }],
      },
    });
    expect(fields(answer)).toEqual({
      'blocks.1.startsAt': 'Overlaps with Session 9:00–10:00.',
      'blocks.2.day': 'Sun 1 August is not a day of the event.',
    });
  });
});
