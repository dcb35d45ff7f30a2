import type { Router } from 'express';
import * as contract from '@shared/features/grants/grants.contract';
import { inEvent, inFund, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { addEvidence, downloadEvidence, readMyGrant, removeEvidence, saveMyGrant, submitMyGrant, withdrawMyGrant } from './grants-applications.service';
import { answerQuery, proposeAward } from './grants-awards.service';
import { readBoard, readGrant } from './grants-board.service';
import { answerAward, sendDecisions } from './grants-decisions.service';
import { approveAwards, decideAward, readFund } from './grants-funder.service';
import { createFund, updateFund } from './grants-funds.service';
import { scoreApplication } from './grants-scores.service';

const committee = inEvent('organiser', 'reviewer');
const organisers = inEvent('organiser');
const funder = inFund('funder');

export function grantsRoutes(router: Router): void {
  serve(router, contract.readMyGrant, { access: signedIn, handle: ({ actor, params, now }) => readMyGrant(actor, params.event, now) });
  serve(router, contract.saveMyGrant, { access: signedIn, handle: ({ actor, params, version, body, now }) => saveMyGrant(actor, params.event, version, body, now) });
  serve(router, contract.submitMyGrant, { access: signedIn, handle: ({ actor, params, version, now }) => submitMyGrant(actor, params.event, version, now) });
  serve(router, contract.withdrawMyGrant, { access: signedIn, handle: ({ actor, params, version, now }) => withdrawMyGrant(actor, params.event, version, now) });
  serve(router, contract.addEvidence, { access: signedIn, handle: ({ actor, params, body, file, now }) => addEvidence(actor, params.event, body.kind, file, now) });
  serve(router, contract.removeEvidence, { access: signedIn, handle: ({ actor, params, now }) => removeEvidence(actor, params.event, params.evidence, now) });
  serve(router, contract.answerAward, { access: signedIn, handle: ({ actor, params, version, body, now }) => answerAward(actor, params.event, version, body.answer, now) });
  serve(router, contract.downloadEvidence, { access: signedIn, handle: ({ actor, eventId, params }) => downloadEvidence(actor, eventId, params.evidence) });
  serve(router, contract.createFund, { access: organisers, handle: ({ actor, params, body }) => createFund(actor, params.event, body) });
  serve(router, contract.updateFund, { access: organisers, handle: ({ actor, eventId, fundId, version, body }) => updateFund(actor, eventId, fundId, version, body) });
  serve(router, contract.readBoard, { access: committee, handle: ({ actor, eventId, now }) => readBoard(actor, eventId, now) });
  serve(router, contract.readGrant, { access: committee, handle: ({ actor, eventId, params, now }) => readGrant(actor, eventId, params.application, now) });
  serve(router, contract.scoreGrant, { access: committee, handle: ({ actor, eventId, params, body }) => scoreApplication(actor, eventId, params.application, body) });
  serve(router, contract.proposeAward, { access: organisers, handle: ({ actor, eventId, fundId, params, body, now }) => proposeAward(actor, eventId, params.application, fundId, body, now) });
  serve(router, contract.answerQuery, { access: organisers, handle: ({ actor, eventId, params, version, body, now }) => answerQuery(actor, eventId, params.award, version, body.text, now) });
  serve(router, contract.sendDecisions, { access: organisers, handle: ({ actor, params, body, now }) => sendDecisions(actor, params.event, body.answerBy, now) });
  serve(router, contract.readFund, { access: funder, handle: ({ fundId }) => readFund(fundId) });
  serve(router, contract.decideAward, { access: funder, handle: ({ actor, fundId, params, version, body, now }) => decideAward(actor, fundId, params.award, version, body, now) });
  serve(router, contract.approveAwards, { access: funder, handle: ({ actor, fundId, body, now }) => approveAwards(actor, fundId, body.awards, now) });
}
