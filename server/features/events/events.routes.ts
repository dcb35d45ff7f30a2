import type { Router } from 'express';
import * as contract from '@shared/features/events/events.contract';
import { notFound } from '@shared/http/problem';
import { inEvent, inInstitute, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { endRole, holdersOf } from '@server/features/accounts/accounts.service';
import { replaceDayFrames, replaceDeadlines, replaceRooms } from './events-frame.service';
import {
  changeEventState,
  createEvent,
  eventsToWorkOn,
  listEvents,
  readEvent,
  updateEvent,
} from './events.service';

const team = inEvent('organiser', 'reviewer', 'desk', 'finance');
const organiser = inEvent('organiser');

export function eventsRoutes(router: Router): void {
  serve(router, contract.listMyEvents, {
    access: signedIn,
    handle: async ({ actor }) => ({ items: await eventsToWorkOn(actor) }),
  });
  serve(router, contract.listEvents, {
    access: inInstitute('administrator', 'finance'),
    handle: ({ query }) => listEvents(query),
  });
  serve(router, contract.createEvent, {
    access: inInstitute('administrator'),
    handle: ({ actor, body }) => createEvent(actor, body),
  });
  serve(router, contract.readEvent, {
    access: team,
    handle: ({ actor, params, now }) => readEvent(actor, params.event, now),
  });
  serve(router, contract.updateEvent, {
    access: organiser,
    handle: ({ actor, params, version, body }) => updateEvent(actor, params.event, version, body),
  });
  serve(router, contract.changeEventState, {
    access: organiser,
    handle: ({ actor, params, version, body, now }) =>
      changeEventState(actor, params.event, body.to, version, now),
  });
  serve(router, contract.replaceRooms, {
    access: organiser,
    handle: ({ actor, params, version, body }) => replaceRooms(actor, params.event, version, body.rooms),
  });
  serve(router, contract.replaceDayFrames, {
    access: organiser,
    handle: ({ actor, params, version, body }) => replaceDayFrames(actor, params.event, version, body.blocks),
  });
  serve(router, contract.replaceDeadlines, {
    access: organiser,
    handle: ({ actor, params, version, body }) =>
      replaceDeadlines(actor, params.event, version, body.deadlines),
  });
  teamRoutes(router);
}

function teamRoutes(router: Router): void {
  serve(router, contract.listTeam, {
    access: organiser,
    handle: async ({ eventId }) => {
      const roles = ['organiser', 'reviewer', 'desk'] as const;
      const lists = await Promise.all(roles.map((role) => holdersOf('event', eventId, role)));
      return {
        items: roles.flatMap((role, index) =>
          (lists[index] ?? []).map((person) => ({
            grantId: person.grantId,
            accountId: person.id,
            role,
            printedName: person.printedName,
            email: person.email,
            affiliation: person.affiliation,
          })),
        ),
      };
    },
  });
  serve(router, contract.endTeamRole, {
    access: organiser,
    handle: async ({ actor, eventId, params }) => {
      const roles = ['organiser', 'reviewer', 'desk'] as const;
      const holders = (await Promise.all(roles.map((role) => holdersOf('event', eventId, role)))).flat();
      if (!holders.some((person) => person.id === params.account && person.grantId === params.grant))
        throw notFound('This role');
      await endRole({ accountId: params.account, grantId: params.grant, by: actor });
    },
  });
}
