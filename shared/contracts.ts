import type { AnyEndpoint } from './http/endpoint';
import { financeEndpoints } from './features/finance/finance.contract';
import { registrationEndpoints } from './features/registration/registration.contract';
import { messagesEndpoints } from './features/messages/messages.contract';
import { siteEndpoints } from './features/site/site.contract';
import { runupEndpoints } from './features/runup/runup.contract';
import { grantsEndpoints } from './features/grants/grants.contract';
import { grantsCommitteeEndpoints } from './features/grants/grants-committee.contract';
import { grantsFunderEndpoints } from './features/grants/grants-funder.contract';
import { accountsEndpoints } from './features/accounts/accounts.contract';
import { eventsEndpoints } from './features/events/events.contract';
import { talksCoursesEndpoints } from './features/talks/talks-courses.contract';
import { talksInvitationEndpoints } from './features/talks/talks-invitation.contract';
import { talksMaterialsEndpoints } from './features/talks/talks-materials.contract';
import { talksStayEndpoints } from './features/talks/talks-stay.contract';
import { talksEndpoints } from './features/talks/talks.contract';
import { programmeEndpoints } from './features/programme/programme.contract';

/** Every operation of the API: the documentation and the tests walk this list. One line per feature. */
export const contracts: AnyEndpoint[] = [
  ...accountsEndpoints,
  ...eventsEndpoints,
  ...talksEndpoints,
  ...talksInvitationEndpoints,
  ...talksStayEndpoints,
  ...talksCoursesEndpoints,
  ...talksMaterialsEndpoints,
  ...programmeEndpoints,
  ...financeEndpoints,
  ...registrationEndpoints,
  ...grantsEndpoints,
  ...grantsCommitteeEndpoints,
  ...grantsFunderEndpoints,
  ...messagesEndpoints,
  ...runupEndpoints,
  ...siteEndpoints,
];
