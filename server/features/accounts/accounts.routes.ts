import type { Router } from 'express';
import * as contract from '@shared/features/accounts/accounts.contract';
import type { AccountRow, AuditRow } from '@shared/features/accounts/accounts.contract';
import type { Page } from '@shared/http/page';
import { forbidden, notFound } from '@shared/http/problem';
import { env } from '@server/env';
import { anyone, inInstitute, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import {
  acceptInvitation,
  accountRow,
  createInvitation,
  listAccounts,
  listAudit,
  readInvitation,
  saveProfile,
  sessionFor,
} from './accounts-office.service';
import { endSession, openSessions } from './accounts-session.service';
import {
  askReset,
  changePassword,
  resetPassword,
  signIn,
  signOut,
  signUp,
  verifyEmail,
} from './accounts-sign-in.service';
import { canGrantRole } from './accounts.policy';
import { endRole, grantRole } from './accounts.service';

interface DemoAccount {
  role: string;
  email: string;
  password: string;
}

export function accountsRoutes(router: Router, demoAccounts: () => Promise<DemoAccount[]>): void {
  serve(router, contract.readSession, {
    access: anyone,
    handle: (context) => sessionFor(context.req, context.res, context.maybeActor?.accountId),
  });
  serve(router, contract.signIn, {
    access: anyone,
    handle: async (context) =>
      sessionFor(context.req, context.res, (await signIn(context.req, context.res, context.body)).id),
  });
  serve(router, contract.signOut, { access: anyone, handle: ({ req, res }) => signOut(req, res) });
  serve(router, contract.signUp, {
    access: anyone,
    handle: async ({ req, body }) => {
      await signUp(req, body);
      return { sent: true as const };
    },
  });
  serve(router, contract.verifyEmail, {
    access: anyone,
    handle: async (context) =>
      sessionFor(context.req, context.res, await verifyEmail(context.req, context.res, context.body.token)),
  });
  serve(router, contract.askReset, {
    access: anyone,
    handle: async ({ req, body }) => {
      await askReset(req, body.email);
      return { sent: true as const };
    },
  });
  serve(router, contract.resetPassword, {
    access: anyone,
    handle: async (context) =>
      sessionFor(context.req, context.res, await resetPassword(context.req, context.res, context.body)),
  });
  serve(router, contract.listDemoAccounts, {
    access: anyone,
    handle: () => {
      if (!env.DEMO) throw notFound();
      return demoAccounts();
    },
  });
  ownRoutes(router);
  invitationRoutes(router);
  officeRoutes(router);
}

function ownRoutes(router: Router): void {
  serve(router, contract.changePassword, {
    access: signedIn,
    handle: ({ req, res, actor, body }) => changePassword(req, res, actor.accountId, body),
  });
  serve(router, contract.saveProfile, {
    access: signedIn,
    handle: ({ actor, version, body }) => saveProfile(actor, version, body),
  });
  serve(router, contract.listSessions, {
    access: signedIn,
    handle: async ({ req, actor }) => ({ items: await openSessions(req, actor.accountId) }),
  });
  serve(router, contract.endSession, {
    access: signedIn,
    handle: ({ actor, params }) => endSession(actor.accountId, params.session),
  });
}

function invitationRoutes(router: Router): void {
  serve(router, contract.invite, {
    access: signedIn,
    handle: async ({ actor, body }) => {
      await createInvitation(actor, body);
      return { sent: true as const };
    },
  });
  serve(router, contract.readInvitation, {
    access: anyone,
    handle: ({ params }) => readInvitation(params.token),
  });
  serve(router, contract.acceptInvitation, {
    access: anyone,
    handle: async (context) => {
      const { req, res, maybeActor, params, body } = context;
      return sessionFor(
        context.req,
        context.res,
        await acceptInvitation(req, res, maybeActor, params.token, body.password),
      );
    },
  });
}

function officeRoutes(router: Router): void {
  serve(router, contract.listAccounts, {
    access: inInstitute('administrator'),
    handle: async ({ query }) => (await listAccounts(query)) as Page<AccountRow>,
  });
  serve(router, contract.grantRole, {
    access: inInstitute('administrator'),
    handle: async ({ actor, params, body }) => {
      if (!canGrantRole(actor, body.role, body.scope, body.scopeId)) throw forbidden();
      await grantRole({ accountId: params.account, ...body, by: actor });
      return accountRow(params.account);
    },
  });
  serve(router, contract.endRole, {
    access: inInstitute('administrator'),
    handle: async ({ actor, params }) => {
      await endRole({ accountId: params.account, grantId: params.grant, by: actor });
      return accountRow(params.account);
    },
  });
  serve(router, contract.listAudit, {
    access: inInstitute('administrator'),
    handle: async ({ query }) => (await listAudit(query)) as Page<AuditRow>,
  });
}
