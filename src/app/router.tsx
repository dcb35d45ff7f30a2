import { createBrowserRouter, type RouteObject } from 'react-router-dom';
import { Loading } from '@/components/states';
import { PageFailed } from './page-failed';

/** One page: its code is loaded when it is opened. Each page file exports `Component`. */
const page = (path: string, lazy: () => Promise<{ Component: React.ComponentType }>): RouteObject => ({
  path,
  lazy,
  HydrateFallback: Fallback,
});
const Fallback = () => <Loading what="the page" />;

const layout = (
  name: 'PublicLayout' | 'PersonLayout' | 'WorkspaceLayout' | 'OfficeLayout',
  children: RouteObject[],
  path?: string,
): RouteObject => ({
  path,
  lazy: async () => ({
    Component:
      name === 'PublicLayout'
        ? (await import('./public-frame')).PublicLayout
        : (await import('./frames'))[name],
  }),
  HydrateFallback: Fallback,
  children,
});

/** All routes. Owners add their lines; one line per page. */
export const router = createBrowserRouter([
  {
    errorElement: <PageFailed />,
    children: [
      page('/sign-in', () => import('@/features/accounts/sign-in.page')),
      layout('PublicLayout', [
        page('/', () => import('@/features/site/events.page')),
        page('/events/:event', () => import('@/features/site/event.page')),
        page('/events/:event/programme', () => import('@/features/site/programme.page')),
        page('/events/:event/talks/:talk', () => import('@/features/site/talk.page')),
        page('/events/:event/people', () => import('@/features/site/people.page')),
        page('/sign-up', () => import('@/features/accounts/sign-up.page')),
        page('/verify/:token', () => import('@/features/accounts/verify.page')),
        page('/reset', () => import('@/features/accounts/ask-reset.page')),
        page('/reset/:token', () => import('@/features/accounts/reset.page')),
        page('/invitation/:token', () => import('@/features/accounts/invitation.page')),
        page('/speaker-invitation/:token', () => import('@/features/talks/speaker-invitation.page')),
        page('/calendar-answer/:token', () => import('@/features/messages/calendar-answer.page')),
      ]),
      layout('PersonLayout', [
        page('/home', () => import('@/features/site/home.page')),
        page('/organise/new', () => import('@/features/events/new-event.page')),
        page('/events/:event/register', () => import('@/features/registration/register.page')),
        page('/events/:event/registration', () => import('@/features/registration/registration.page')),
        page('/profile', () => import('@/features/accounts/profile.page')),
        page('/my-calendar', () => import('@/features/messages/my-calendar.page')),
        page('/events/:event/my-talks/:talk', () => import('@/features/talks/my-talk.page')),
        page('/events/:event/my-travel', () => import('@/features/talks/my-travel.page')),
        page('/events/:event/submit', () => import('@/features/talks/submit.page')),
        page('/events/:event/grant', () => import('@/features/grants/grant.page')),
        page('/funds/:fund', () => import('@/features/grants/funder.page')),
      ]),
      layout('OfficeLayout', [
        page('/office/accounts', () => import('@/features/accounts/accounts.page')),
        page('/office/audit', () => import('@/features/accounts/audit.page')),
        page('/office/messages', () => import('@/features/messages/office-messages.page')),
        page('/office/test-mail', () => import('@/features/messages/test-mail.page')),
      ]),
      layout(
        'WorkspaceLayout',
        [
          { index: true, lazy: () => import('@/features/runup/overview.page') },
          page('registrations', () => import('@/features/registration/registrations.page')),
          page('desk', () => import('@/features/registration/desk.page')),
          page('settings/fees', () => import('@/features/finance/fees.page')),
          page('settings', () => import('@/features/events/settings.page')),
          page('people', () => import('@/features/events/people.page')),
          page('programme', () => import('@/features/programme/composer.page')),
          page('talks', () => import('@/features/talks/talks.page')),
          page('grants', () => import('@/features/grants/grants.page')),
          page('messages', () => import('@/features/messages/event-messages.page')),
        ],
        '/organise/:event',
      ),
      page('*', () => import('./not-found.page')),
    ],
  },
]);
