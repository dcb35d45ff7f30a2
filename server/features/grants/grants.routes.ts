import type { Router } from 'express';
import * as contract from '@shared/features/grants/grants.contract';
import * as committee from '@shared/features/grants/grants-committee.contract';
import * as funding from '@shared/features/grants/grants-funder.contract';
import { inEvent, inFund, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import {
  addEvidence,
  downloadEvidence,
  readMyGrant,
  removeEvidence,
  saveMyGrant,
  submitMyGrant,
  withdrawMyGrant,
} from './grants-applications.service';
import { answerQuery, proposeAward } from './grants-awards.service';
import { readBoard, readGrant } from './grants-board.service';
import { answerAward, sendDecisions } from './grants-decisions.service';
import { approveAwards, decideAward, readFund } from './grants-funder.service';
import { createFund, updateFund } from './grants-funds.service';
import { scoreApplication } from './grants-scores.service';

const members = inEvent('organiser', 'reviewer');
const organisers = inEvent('organiser');
const funder = inFund('funder');

export function grantsRoutes(router: Router): void {
  serve(router, contract.readMyGrant, {
    access: signedIn,
    handle: ({ actor, params, now }) => readMyGrant(actor, params.event, now),
  });
  serve(router, contract.saveMyGrant, {
    access: signedIn,
    handle: ({ actor, params, version, body, now }) => saveMyGrant(actor, params.event, version, body, now),
  });
  serve(router, contract.submitMyGrant, {
    access: signedIn,
    handle: ({ actor, params, version, now }) => submitMyGrant(actor, params.event, version, now),
  });
  serve(router, contract.withdrawMyGrant, {
    access: signedIn,
    handle: ({ actor, params, version, now }) => withdrawMyGrant(actor, params.event, version, now),
  });
  serve(router, contract.addEvidence, {
    access: signedIn,
    handle: ({ actor, params, body, file, now }) => addEvidence(actor, params.event, body.kind, file, now),
  });
  serve(router, contract.removeEvidence, {
    access: signedIn,
    handle: ({ actor, params, now }) => removeEvidence(actor, params.event, params.evidence, now),
  });
  serve(router, contract.answerAward, {
    access: signedIn,
    handle: ({ actor, params, version, body, now }) =>
      answerAward(actor, params.event, version, body.answer, now),
  });
  serve(router, contract.downloadEvidence, {
    access: signedIn,
    handle: ({ actor, eventId, params }) => downloadEvidence(actor, eventId, params.evidence),
  });
  serve(router, contract.createFund, {
    access: organisers,
    handle: ({ actor, params, body }) => createFund(actor, params.event, body),
  });
  serve(router, contract.updateFund, {
    access: organisers,
    handle: ({ actor, eventId, fundId, version, body }) => updateFund(actor, eventId, fundId, version, body),
  });
  serve(router, committee.readBoard, {
    access: members,
    handle: ({ actor, eventId, now }) => readBoard(actor, eventId, now),
  });
  serve(router, committee.readGrant, {
    access: members,
    handle: ({ actor, eventId, params, now }) => readGrant(actor, eventId, params.application, now),
  });
  serve(router, committee.scoreGrant, {
    access: members,
    handle: ({ actor, eventId, params, body }) => scoreApplication(actor, eventId, params.application, body),
  });
  serve(router, committee.proposeAward, {
    access: organisers,
    handle: ({ actor, eventId, fundId, params, body, now }) =>
      proposeAward(actor, eventId, params.application, fundId, body, now),
  });
  serve(router, committee.answerQuery, {
    access: organisers,
    handle: ({ actor, eventId, params, version, body, now }) =>
      answerQuery(actor, eventId, params.award, version, body.text, now),
  });
  serve(router, committee.sendDecisions, {
    access: organisers,
    handle: ({ actor, params, body, now }) => sendDecisions(actor, params.event, body.answerBy, now),
  });
  serve(router, funding.readFund, { access: funder, handle: ({ fundId }) => readFund(fundId) });
  serve(router, funding.decideAward, {
    access: funder,
    handle: ({ actor, fundId, params, version, body, now }) =>
      decideAward(actor, fundId, params.award, version, body, now),
  });
  serve(router, funding.approveAwards, {
    access: funder,
    handle: ({ actor, fundId, body, now }) => approveAwards(actor, fundId, body.awards, now),
  });
}
