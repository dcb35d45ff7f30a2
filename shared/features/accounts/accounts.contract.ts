import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { pageOf, pageQuery } from '../../http/page';
import { id } from '../../lib/ids';
import { parseOrcid } from '../../lib/orcid';
import { instant, timeZone } from '../../lib/time';

export const roles = ['administrator', 'finance', 'organiser', 'reviewer', 'desk', 'funder'] as const;
export const roleSchema = z.enum(roles);
export type Role = z.infer<typeof roleSchema>;

export const scopes = ['institute', 'event', 'fund'] as const;
export const scopeSchema = z.enum(scopes);
export type Scope = z.infer<typeof scopeSchema>;

export const careerStages = ['student', 'doctoral', 'postdoc', 'faculty', 'industry', 'other'] as const;
export const careerStageSchema = z.enum(careerStages);
export type CareerStage = z.infer<typeof careerStageSchema>;

/** An address, folded to lower case. */
export const email = z
  .string()
  .trim()
  .max(254)
  .pipe(z.email('Write an e-mail address like name@example.org.'))
  .transform((value) => value.toLowerCase());

/** 12 to 128 characters; common passwords are refused by a rule, there are no composition rules (OWASP ASVS 6.2). */
export const password = z
  .string()
  .min(12, 'Use at least 12 characters.')
  .max(128, 'Use at most 128 characters.');

const name = z
  .string()
  .trim()
  .min(1, 'This is needed.')
  .max(120, 'At most 120 characters.')
  .regex(/^[^\p{Cc}]*$/u, 'No line breaks or control characters.');

/** ISO 3166-1 alpha-2, upper case. */
export const countryCode = z.string().regex(/^[A-Z]{2}$/, 'Choose a country.');

export const profileInput = z.strictObject({
  givenName: name,
  familyName: name,
  /** As it stands on badges and in the programme. */
  printedName: name,
  affiliation: z.string().trim().max(200),
  /** ISO 3166-1 alpha-2, or null. */
  country: countryCode.nullable(),
  careerStage: careerStageSchema.nullable(),
  /** ORCID iD, check character verified (ISO 7064 MOD 11-2). */
  orcid: z
    .string()
    .trim()
    .max(60)
    .nullable()
    .transform((value, context) => {
      if (value === null || value === '') return null;
      const parsed = parseOrcid(value);
      if (parsed) return parsed;
      context.addIssue({
        code: 'custom',
        message:
          'An ORCID iD has 16 characters like 0000-0002-1825-0097, and the last one must fit the others.',
      });
      return z.NEVER;
    }),
  /** IANA zone of the reader. */
  timeZone: timeZone,
});

export const grantSchema = z.object({
  id,
  role: roleSchema,
  scope: scopeSchema,
  /** Event or fund; null for the institute. */
  scopeId: id.nullable(),
  /** Slug of the event or name of the fund, for links. */
  scopeKey: z.string().nullable(),
  /** Title of the event, name of the fund. */
  scopeTitle: z.string().nullable(),
});
export type Grant = z.infer<typeof grantSchema>;

export const accountSchema = z.object({
  id,
  email: z.string(),
  emailVerified: z.boolean(),
  givenName: z.string(),
  familyName: z.string(),
  printedName: z.string(),
  affiliation: z.string(),
  country: z.string().nullable(),
  careerStage: careerStageSchema.nullable(),
  orcid: z.string().nullable(),
  timeZone: z.string(),
  grants: z.array(grantSchema),
  version: z.number().int(),
});
export type Account = z.infer<typeof accountSchema>;

/** Who is asking, and the token that every change must carry in the header `X-CSRF-Token`. */
export const sessionSchema = z.object({
  account: accountSchema.nullable(),
  csrfToken: z.string(),
  /** Demo data and local fakes are in use. */
  demo: z.boolean(),
  instituteName: z.string(),
});
export type Session = z.infer<typeof sessionSchema>;

export const readSession = endpoint({
  id: 'accounts.session',
  method: 'GET',
  path: '/api/session',
  summary: 'Who is signed in, and the CSRF token for changes.',
  response: sessionSchema,
});
export const signIn = endpoint({
  id: 'accounts.sign_in',
  method: 'POST',
  path: '/api/session',
  summary: 'Sign in with address and password.',
  body: z.strictObject({
    email,
    password: z.string().min(1, 'This is needed.').max(128),
    stay: z.boolean().default(false),
  }),
  response: sessionSchema,
});
export const signOut = endpoint({
  id: 'accounts.sign_out',
  method: 'DELETE',
  path: '/api/session',
  summary: 'Sign out of this session.',
  response: 'empty',
});
export const signUp = endpoint({
  id: 'accounts.sign_up',
  method: 'POST',
  path: '/api/accounts',
  summary:
    'Open an account; a letter with a link verifies the address. The answer is the same for a known address.',
  body: z.strictObject({
    email,
    password,
    givenName: name,
    familyName: name,
    timeZone: timeZone.default('UTC'),
  }),
  response: z.object({ sent: z.literal(true) }),
});
export const verifyEmail = endpoint({
  id: 'accounts.verify',
  method: 'POST',
  path: '/api/accounts/verification',
  summary: 'Verify an address with the token from the letter; signs in.',
  body: z.strictObject({ token: z.string().min(20).max(200) }),
  response: sessionSchema,
});
export const askReset = endpoint({
  id: 'accounts.ask_reset',
  method: 'POST',
  path: '/api/accounts/reset-request',
  summary: 'Send a link for a new password. The answer is the same for an unknown address.',
  body: z.strictObject({ email }),
  response: z.object({ sent: z.literal(true) }),
});
export const resetPassword = endpoint({
  id: 'accounts.reset',
  method: 'POST',
  path: '/api/accounts/reset',
  summary: 'Set a new password with the token from the letter; ends all other sessions and signs in.',
  body: z.strictObject({ token: z.string().min(20).max(200), password }),
  response: sessionSchema,
});
export const changePassword = endpoint({
  id: 'accounts.change_password',
  method: 'POST',
  path: '/api/account/password',
  summary: 'Change one’s own password; the present one is asked for.',
  body: z.strictObject({ current: z.string().max(128), password }),
  response: 'empty',
});
export const saveProfile = endpoint({
  id: 'accounts.save_profile',
  method: 'PUT',
  path: '/api/account/profile',
  summary: 'Save one’s own profile.',
  body: profileInput,
  response: accountSchema,
  versioned: true,
});

export const sessionRow = z.object({
  id: z.string(),
  startedAt: instant,
  lastSeenAt: instant,
  /** Browser and system as the browser names them, shortened. */
  device: z.string(),
  present: z.boolean(),
});
export const listSessions = endpoint({
  id: 'accounts.sessions',
  method: 'GET',
  path: '/api/account/sessions',
  summary: 'One’s own open sessions.',
  response: z.object({ items: z.array(sessionRow) }),
});
export const endSession = endpoint({
  id: 'accounts.end_session',
  method: 'DELETE',
  path: '/api/account/sessions/:session',
  summary: 'End one of one’s own sessions.',
  params: z.object({ session: z.string().max(80) }),
  response: 'empty',
});

export const invitationInput = z.strictObject({
  email,
  givenName: name,
  familyName: name,
  role: roleSchema,
  scope: scopeSchema,
  scopeId: id.nullable(),
});
export const invite = endpoint({
  id: 'accounts.invite',
  method: 'POST',
  path: '/api/invitations',
  summary: 'Send a link that opens an account with a role (administrators).',
  body: invitationInput,
  response: z.object({ sent: z.literal(true) }),
});
export const invitationView = z.object({
  email: z.string(),
  givenName: z.string(),
  familyName: z.string(),
  role: roleSchema,
  scopeTitle: z.string().nullable(),
  /** An account with a password exists: sign in is all that is needed. */
  hasPassword: z.boolean(),
});
export const readInvitation = endpoint({
  id: 'accounts.read_invitation',
  method: 'GET',
  path: '/api/invitations/:token',
  summary: 'What an invitation link offers.',
  params: z.object({ token: z.string().min(20).max(200) }),
  response: invitationView,
});
export const acceptInvitation = endpoint({
  id: 'accounts.accept_invitation',
  method: 'POST',
  path: '/api/invitations/:token',
  summary: 'Take the invitation: sets the password of a new account, grants the role, signs in.',
  params: z.object({ token: z.string().min(20).max(200) }),
  body: z.strictObject({ password: password.optional() }),
  response: sessionSchema,
});

export const accountRow = z.object({
  id,
  email: z.string(),
  printedName: z.string(),
  affiliation: z.string(),
  country: z.string().nullable(),
  emailVerified: z.boolean(),
  disabled: z.boolean(),
  grants: z.array(grantSchema),
});
export type AccountRow = z.infer<typeof accountRow>;
export const listAccounts = endpoint({
  id: 'accounts.list',
  method: 'GET',
  path: '/api/accounts',
  summary: 'Accounts by name, searched by name, address or affiliation (administrators).',
  query: pageQuery.extend({ q: z.string().max(100).optional(), role: roleSchema.optional() }),
  response: pageOf(accountRow),
});
export const grantRole = endpoint({
  id: 'accounts.grant_role',
  method: 'POST',
  path: '/api/accounts/:account/roles',
  summary: 'Give a role (administrators).',
  params: z.object({ account: id }),
  body: z.strictObject({ role: roleSchema, scope: scopeSchema, scopeId: id.nullable() }),
  response: accountRow,
});
export const endRole = endpoint({
  id: 'accounts.end_role',
  method: 'DELETE',
  path: '/api/accounts/:account/roles/:grant',
  summary: 'End a role; the record of it stays (administrators).',
  params: z.object({ account: id, grant: id }),
  response: accountRow,
});

export const auditRow = z.object({
  id,
  at: instant,
  actorName: z.string(),
  /** Feature and verb in the past: `talks.decided`. */
  action: z.string(),
  subject: z.string(),
  subjectId: z.string(),
  eventId: id.nullable(),
  before: z.unknown(),
  after: z.unknown(),
});
export type AuditRow = z.infer<typeof auditRow>;
export const listAudit = endpoint({
  id: 'accounts.audit',
  method: 'GET',
  path: '/api/audit',
  summary: 'Audit trail, newest first (administrators).',
  query: pageQuery.extend({ action: z.string().max(60).optional(), q: z.string().max(100).optional() }),
  response: pageOf(auditRow),
});

export const listDemoAccounts = endpoint({
  id: 'accounts.demo',
  method: 'GET',
  path: '/api/demo-accounts',
  summary: 'Demo accounts; exists in demo mode only.',
  response: z.array(z.object({ role: z.string(), email: z.string(), password: z.string() })),
});

export const accountsEndpoints = [
  readSession,
  signIn,
  signOut,
  signUp,
  verifyEmail,
  askReset,
  resetPassword,
  changePassword,
  saveProfile,
  listSessions,
  endSession,
  invite,
  readInvitation,
  acceptInvitation,
  listAccounts,
  grantRole,
  endRole,
  listAudit,
  listDemoAccounts,
];
