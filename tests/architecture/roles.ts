/**
 * Who may do what: one row per operation of shared/contracts.ts. The answers are written down here, not computed from
 * the doors, so that a door that is opened wider by mistake fails. A new operation needs a row.
 */
export const actors = [
  'stranger',
  'administrator',
  'finance',
  'organiser',
  'organiserElsewhere',
  'reviewer',
  'desk',
  'funder',
  'funderElsewhere',
  'speaker',
  'participant',
  'plain',
] as const;
export type ActorName = (typeof actors)[number];
type Other = Exclude<ActorName, 'stranger'>;

/** `in`: the door lets through (what is inside may still say that the thing is not theirs). */
export type Expected = 'in' | 401 | 403 | 404;
export type Row = Record<ActorName, Expected>;

const row = (answer: (actor: Other) => Expected): Row =>
  Object.fromEntries(actors.map((actor) => [actor, actor === 'stranger' ? 401 : answer(actor)])) as Row;

/** Everybody, strangers too. */
const anyone: Row = { ...row(() => 'in'), stranger: 'in' };
/** Whoever is signed in; on one's own things, the service looks whose they are. */
const signedIn = row(() => 'in');
/** The event office, and the institute's roles named here; that such pages exist is no secret: 403. */
const office = (...roles: Other[]): Row =>
  row((actor) => (actor === 'administrator' || roles.includes(actor) ? 'in' : 403));
/** Those with another role in this event, and the finance office, hear 403; for everybody else the event does not exist. */
const insiders: Other[] = ['finance', 'organiser', 'reviewer', 'desk'];
const ofEvent = (...roles: Other[]): Row =>
  row((actor) =>
    actor === 'administrator' || roles.includes(actor) ? 'in' : insiders.includes(actor) ? 403 : 404,
  );
/** The funder of this fund; the finance office hears 403, other funds and events 404. */
const ofFund: Row = row((actor) =>
  actor === 'administrator' || actor === 'funder' ? 'in' : actor === 'finance' ? 403 : 404,
);
/** A thing of somebody's own, read by those named here; for everybody else it does not exist. */
const reads = (...roles: Other[]): Row =>
  row((actor) => (actor === 'administrator' || roles.includes(actor) ? 'in' : 404));

export const table: Record<string, Row> = {
  'accounts.session': anyone,
  'accounts.sign_in': anyone,
  'accounts.sign_out': anyone,
  'accounts.sign_up': anyone,
  'accounts.verify': anyone,
  'accounts.ask_reset': anyone,
  'accounts.reset': anyone,
  'accounts.demo': anyone,
  'accounts.change_password': signedIn,
  'accounts.save_profile': signedIn,
  'accounts.sessions': signedIn,
  'accounts.end_session': signedIn,
  'accounts.invite': signedIn,
  'accounts.read_invitation': anyone,
  'accounts.accept_invitation': anyone,
  'accounts.list': office(),
  'accounts.grant_role': office(),
  'accounts.end_role': office(),
  'accounts.audit': office(),
  'events.mine': signedIn,
  'events.list': office('finance'),
  'events.create': office(),
  'events.read': ofEvent('organiser', 'reviewer', 'desk', 'finance'),
  'events.update': ofEvent('organiser'),
  'events.change_state': ofEvent('organiser'),
  'events.replace_rooms': ofEvent('organiser'),
  'events.replace_day_frames': ofEvent('organiser'),
  'events.replace_deadlines': ofEvent('organiser'),
  'events.team': ofEvent('organiser'),
  'events.end_team_role': ofEvent('organiser'),
  'talks.list': ofEvent('organiser', 'reviewer'),
  'talks.read': reads('organiser', 'reviewer', 'speaker'),
  'talks.create': ofEvent('organiser'),
  'talks.update': ofEvent('organiser'),
  'talks.save_abstract': signedIn,
  'talks.hand_in': signedIn,
  'talks.decide': ofEvent('organiser'),
  'talks.withdraw': signedIn,
  'talks.submit': signedIn,
  'talks.call': anyone,
  'talks.mine': signedIn,
  'talks.remind': ofEvent('organiser'),
  'talks.stage': signedIn,
  'talks.invite': ofEvent('organiser'),
  'talks.read_invitation': anyone,
  'talks.answer_invitation': anyone,
  'talks.courses': ofEvent('organiser', 'reviewer'),
  'talks.create_course': ofEvent('organiser'),
  'talks.update_course': ofEvent('organiser'),
  'talks.prerequisites': ofEvent('organiser'),
  'talks.read_presence': signedIn,
  'talks.save_presence': signedIn,
  'talks.materials': anyone,
  'talks.upload': signedIn,
  'talks.material_access': signedIn,
  'talks.download': anyone,
  'talks.recording': signedIn,
  'programme.read': anyone,
  'programme.mine': signedIn,
  'programme.read_draft': ofEvent('organiser'),
  'programme.change_draft': ofEvent('organiser'),
  'programme.compare_draft': ofEvent('organiser'),
  'programme.list_revisions': ofEvent('organiser'),
  'programme.read_revision': ofEvent('organiser'),
  'programme.compare_revisions': ofEvent('organiser'),
  'programme.publish': ofEvent('organiser'),
  'finance.fees': anyone,
  'finance.replace_fees': ofEvent('organiser'),
  'finance.trial_balance': office('finance'),
  'registration.mine': signedIn,
  'registration.quote': anyone,
  'registration.register': signedIn,
  'registration.change': signedIn,
  'registration.cancel': signedIn,
  'registration.pay': signedIn,
  'registration.refresh': signedIn,
  'registration.apply': signedIn,
  'registration.withdraw_application': signedIn,
  'registration.all_mine': signedIn,
  'registration.applications': ofEvent('organiser', 'reviewer'),
  'registration.decide': ofEvent('organiser'),
  'registration.export': ofEvent('organiser', 'finance'),
  'registration.list': ofEvent('organiser', 'finance'),
  'registration.read': ofEvent('organiser', 'finance'),
  'registration.places': ofEvent('organiser', 'finance'),
  'registration.desk': ofEvent('organiser', 'desk'),
  'registration.check_in': ofEvent('organiser', 'desk'),
  'grants.mine': signedIn,
  'grants.save': signedIn,
  'grants.submit': signedIn,
  'grants.withdraw': signedIn,
  'grants.add_evidence': signedIn,
  'grants.remove_evidence': signedIn,
  'grants.answer': signedIn,
  'grants.evidence': signedIn,
  'grants.create_fund': ofEvent('organiser'),
  'grants.update_fund': ofEvent('organiser'),
  'grants.board': ofEvent('organiser', 'reviewer'),
  'grants.read': ofEvent('organiser', 'reviewer'),
  'grants.score': ofEvent('organiser', 'reviewer'),
  'grants.propose': ofEvent('organiser'),
  'grants.answer_query': ofEvent('organiser'),
  'grants.send': ofEvent('organiser'),
  'grants.fund': ofFund,
  'grants.decide': ofFund,
  'grants.approve_all': ofFund,
  'messages.list': ofEvent('organiser'),
  'messages.read': ofEvent('organiser'),
  'messages.retry_in_event': ofEvent('organiser'),
  'messages.all': office(),
  'messages.read_any': office(),
  'messages.retry': office(),
  'messages.groups': ofEvent('organiser'),
  'messages.preview': ofEvent('organiser'),
  'messages.test_letter': ofEvent('organiser'),
  'messages.send_letter': ofEvent('organiser'),
  'messages.test_mail': signedIn,
  'messages.read_test_mail': signedIn,
  'messages.test_calendar': signedIn,
  'messages.test_attachment': signedIn,
  'messages.read_answer': anyone,
  'messages.answer': anyone,
  'messages.talk_answers': ofEvent('organiser'),
  'messages.my_feed': signedIn,
  'runup.overview': ofEvent('organiser', 'finance'),
  'site.events': anyone,
  'site.event': anyone,
  'site.talk': anyone,
  'site.people': anyone,
};
