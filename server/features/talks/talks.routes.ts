import type { Router } from 'express';
import * as contract from '@shared/features/talks/talks.contract';
import * as courses from '@shared/features/talks/talks-courses.contract';
import * as invitation from '@shared/features/talks/talks-invitation.contract';
import * as materials from '@shared/features/talks/talks-materials.contract';
import * as stay from '@shared/features/talks/talks-stay.contract';
import { anyone, inEvent, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { sessionFor } from '@server/features/accounts/accounts-office.service';
import {
  createCourse,
  listCourses,
  readPresence,
  replacePrerequisites,
  savePresence,
  updateCourse,
} from './talks-courses.service';
import { answerSpeakerInvitation, inviteSpeaker, readSpeakerInvitation } from './talks-invitation.service';
import { remindSpeakers } from './talks-letters.service';
import {
  downloadMaterial,
  setMaterialAccess,
  setRecordingConsent,
  uploadMaterial,
  visibleMaterials,
} from './talks-materials.service';
import { handInAbstract, readCall, saveAbstract, submitTalk } from './talks-abstract.service';
import { readStage } from './talks-stage.service';
import { createTalk, updateTalk } from './talks-structure.service';
import { listTalks } from './talks-list.service';
import { decideTalk, readTalk, talksOfPerson, withdrawTalk } from './talks.service';

const organiser = inEvent('organiser');

export function talksRoutes(router: Router): void {
  serve(router, contract.listTalks, {
    access: inEvent('organiser', 'reviewer'),
    handle: ({ actor, eventId, query }) => listTalks(actor, eventId, query),
  });
  serve(router, contract.readTalk, {
    access: signedIn,
    handle: ({ actor, eventId, params }) => readTalk(actor, eventId, params.talk),
  });
  serve(router, contract.createTalk, {
    access: organiser,
    handle: ({ actor, eventId, body }) => createTalk(actor, eventId, body),
  });
  serve(router, contract.updateTalk, {
    access: organiser,
    handle: ({ actor, eventId, params, version, body }) =>
      updateTalk(actor, eventId, params.talk, version, body),
  });
  serve(router, contract.saveAbstract, {
    access: signedIn,
    handle: ({ actor, eventId, params, version, body }) =>
      saveAbstract(actor, eventId, params.talk, version, body),
  });
  serve(router, contract.handInAbstract, {
    access: signedIn,
    handle: ({ actor, eventId, params, version }) => handInAbstract(actor, eventId, params.talk, version),
  });
  serve(router, contract.decideTalk, {
    access: organiser,
    handle: ({ actor, eventId, params, version, body }) =>
      decideTalk(actor, eventId, params.talk, version, body),
  });
  serve(router, contract.withdrawTalk, {
    access: signedIn,
    handle: ({ actor, eventId, params, version, body }) =>
      withdrawTalk(actor, eventId, params.talk, version, body.note),
  });
  serve(router, contract.submitTalk, {
    access: signedIn,
    handle: ({ actor, params, body, now }) => submitTalk(actor, params.event, body, now),
  });
  serve(router, contract.readCall, {
    access: anyone,
    handle: ({ params, now }) => readCall(params.event, now),
  });
  serve(router, contract.listMyTalks, {
    access: signedIn,
    handle: async ({ actor }) => ({ items: await talksOfPerson(actor.accountId) }),
  });
  serve(router, invitation.remindSpeakers, {
    access: organiser,
    handle: async ({ eventId, now }) => ({ written: await remindSpeakers(eventId, now) }),
  });
  serve(router, stay.readStage, {
    access: signedIn,
    handle: ({ actor, params }) => readStage(actor, params.event),
  });
  invitationRoutes(router);
  courseRoutes(router);
  materialRoutes(router);
}

function invitationRoutes(router: Router): void {
  serve(router, invitation.inviteSpeaker, {
    access: organiser,
    handle: ({ actor, eventId, body }) => inviteSpeaker(actor, eventId, body),
  });
  serve(router, invitation.readSpeakerInvitation, {
    access: anyone,
    handle: ({ params }) => readSpeakerInvitation(params.token),
  });
  serve(router, invitation.answerSpeakerInvitation, {
    access: anyone,
    handle: async ({ req, res, maybeActor, params, body }) => {
      const { accountId, eventSlug, talkId } = await answerSpeakerInvitation(
        req,
        res,
        maybeActor,
        params.token,
        body,
      );
      return { answer: body.answer, session: await sessionFor(req, res, accountId), eventSlug, talkId };
    },
  });
}

function courseRoutes(router: Router): void {
  serve(router, courses.listCourses, {
    access: inEvent('organiser', 'reviewer'),
    handle: ({ eventId }) => listCourses(eventId),
  });
  serve(router, courses.createCourse, {
    access: organiser,
    handle: ({ actor, eventId, body }) => createCourse(actor, eventId, body),
  });
  serve(router, courses.updateCourse, {
    access: organiser,
    handle: ({ actor, eventId, params, version, body }) =>
      updateCourse(actor, eventId, params.course, version, body),
  });
  serve(router, courses.replacePrerequisites, {
    access: organiser,
    handle: ({ actor, eventId, body }) => replacePrerequisites(actor, eventId, body.pairs),
  });
  serve(router, stay.readMyPresence, {
    access: signedIn,
    handle: ({ actor, eventId }) => readPresence(actor, eventId),
  });
  serve(router, stay.saveMyPresence, {
    access: signedIn,
    handle: ({ actor, eventId, version, body }) => savePresence(actor, eventId, version, body),
  });
}

function materialRoutes(router: Router): void {
  serve(router, materials.listMaterials, {
    access: anyone,
    handle: async ({ maybeActor, eventId, now }) => ({
      items: await visibleMaterials(maybeActor, eventId, now),
    }),
  });
  serve(router, materials.uploadMaterial, {
    access: signedIn,
    handle: ({ actor, eventId, params, body, file }) =>
      uploadMaterial(actor, eventId, params.talk, body.kind, file),
  });
  serve(router, materials.setMaterialAccess, {
    access: signedIn,
    handle: ({ actor, eventId, params, version, body }) =>
      setMaterialAccess(actor, eventId, params.talk, params.material, version, body),
  });
  serve(router, materials.downloadMaterial, {
    access: anyone,
    handle: ({ maybeActor, eventId, params, now }) => downloadMaterial(maybeActor, eventId, params.file, now),
  });
  serve(router, materials.setRecordingConsent, {
    access: signedIn,
    handle: ({ actor, eventId, params, body }) =>
      setRecordingConsent(actor, eventId, params.talk, body.consent),
  });
}
