import type { Router } from 'express';
import * as contract from '@shared/features/programme/programme.contract';
import { anyone, inEvent, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import {
  compareDraft,
  compareRevisions,
  listRevisions,
  readDraft,
  readMine,
  readPublic,
  readRevision,
} from './programme-read.service';
import { changeDraft } from './programme-draft.service';
import { publishRevision } from './programme.service';

const organiser = inEvent('organiser');

export function programmeRoutes(router: Router): void {
  serve(router, contract.readProgramme, {
    access: anyone,
    handle: ({ maybeActor, params }) => readPublic(maybeActor, params.event),
  });
  serve(router, contract.readMyProgramme, {
    access: signedIn,
    handle: ({ actor, params }) => readMine(actor, params.event),
  });
  serve(router, contract.readDraft, {
    access: organiser,
    handle: ({ actor, params }) => readDraft(actor, params.event),
  });
  serve(router, contract.changeDraft, {
    access: organiser,
    handle: ({ actor, params, body, version }) => changeDraft(actor, params.event, body.changes, version),
  });
  serve(router, contract.compareDraft, {
    access: organiser,
    handle: ({ params, query }) => compareDraft(params.event, query.from),
  });
  serve(router, contract.listRevisions, {
    access: organiser,
    handle: ({ params }) => listRevisions(params.event),
  });
  serve(router, contract.readRevision, {
    access: organiser,
    handle: ({ params }) => readRevision(params.event, params.number),
  });
  serve(router, contract.compareRevisions, {
    access: organiser,
    handle: ({ params, query }) => compareRevisions(params.event, params.number, query.from),
  });
  serve(router, contract.publishProgramme, {
    access: organiser,
    handle: ({ actor, params, body, version, now }) =>
      publishRevision(actor, params.event, body, version, now),
  });
}
