import type { Router } from 'express';
import * as contract from '@shared/features/registration/registration.contract';
import { anyone, inEvent, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { priceOf } from '@server/features/finance/finance.service';
import {
  applyForPlace,
  decideApplication,
  listApplications,
  withdrawApplication,
} from './registration-applications.service';
import {
  checkIn,
  exportRegistrations,
  listRegistrations,
  readRegistration,
  registrationsOfPerson,
  searchDesk,
} from './registration-office.service';
import {
  cancelRegistration,
  changeRegistration,
  payOwnOrder,
  placesOf,
  readDoor,
  refreshOwnOrder,
  register,
} from './registration.service';

const office = inEvent('organiser', 'finance');

export function registrationRoutes(router: Router): void {
  serve(router, contract.readDoor, {
    access: signedIn,
    handle: ({ actor, params, now }) => readDoor(actor, params.event, now),
  });
  serve(router, contract.quote, {
    access: anyone,
    handle: ({ eventId, body, now }) => priceOf(eventId, body, now),
  });
  serve(router, contract.register, {
    access: signedIn,
    handle: ({ actor, params, body, now }) => register(actor, params.event, body, now),
  });
  serve(router, contract.changeRegistration, {
    access: signedIn,
    handle: ({ actor, params, version, body }) => changeRegistration(actor, params.event, version, body),
  });
  serve(router, contract.cancelRegistration, {
    access: signedIn,
    handle: ({ actor, params, version, now }) => cancelRegistration(actor, params.event, version, now),
  });
  serve(router, contract.pay, {
    access: signedIn,
    handle: ({ actor, params, now }) => payOwnOrder(actor, params.event, now),
  });
  serve(router, contract.refreshPayment, {
    access: signedIn,
    handle: ({ actor, params, now }) => refreshOwnOrder(actor, params.event, now),
  });
  serve(router, contract.applyForPlace, {
    access: signedIn,
    handle: ({ actor, params, body, now }) => applyForPlace(actor, params.event, body, now),
  });
  serve(router, contract.withdrawApplication, {
    access: signedIn,
    handle: ({ actor, params, version }) => withdrawApplication(actor, params.event, version),
  });
  serve(router, contract.listMyRegistrations, {
    access: signedIn,
    handle: async ({ actor }) => ({ items: await registrationsOfPerson(actor.accountId) }),
  });
  officeRoutes(router);
}

function officeRoutes(router: Router): void {
  serve(router, contract.listApplications, {
    access: inEvent('organiser', 'reviewer'),
    handle: ({ eventId, query }) => listApplications(eventId, query),
  });
  serve(router, contract.decideApplication, {
    access: inEvent('organiser'),
    handle: ({ actor, eventId, params, version, body, now }) =>
      decideApplication(actor, eventId, params.application, version, body, now),
  });
  serve(router, contract.exportRegistrations, {
    access: office,
    handle: ({ actor, eventId }) => exportRegistrations(actor, eventId),
  });
  serve(router, contract.listRegistrations, {
    access: office,
    handle: ({ eventId, query }) => listRegistrations(eventId, query),
  });
  serve(router, contract.readRegistration, {
    access: office,
    handle: ({ eventId, params }) => readRegistration(eventId, params.registration),
  });
  serve(router, contract.readPlaces, {
    access: office,
    handle: ({ eventId, now }) => placesOf(eventId, now),
  });
  serve(router, contract.searchDesk, {
    access: inEvent('organiser', 'desk'),
    handle: ({ eventId, query }) => searchDesk(eventId, query.q),
  });
  serve(router, contract.checkIn, {
    access: inEvent('organiser', 'desk'),
    handle: ({ actor, eventId, params, body, now }) =>
      checkIn(actor, eventId, params.registration, body.present, now),
  });
}
