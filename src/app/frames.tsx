import { useQuery } from '@tanstack/react-query';
import { Link, Navigate, NavLink, Outlet, useLocation, useParams } from 'react-router-dom';
import { holds, sessionQuery, useAccount } from '@/features/accounts/accounts.queries';
import { eventQuery } from '@/features/events/events.queries';
import { Wordmark } from '@/components/mark';
import { ErrorState, Loading } from '@/components/states';
import { EventSwitcher } from './event-switcher';
import { PersonMenu } from './person-menu';
import { RunUp } from './run-up';
import { SkipLink } from './skip-link';

/** Sends strangers to the sign-in page and back afterwards. */
function SignedIn({ children }: { children: React.ReactNode }) {
  const session = useQuery(sessionQuery);
  const location = useLocation();
  if (session.error) return <ErrorState error={session.error} onRetry={() => void session.refetch()} />;
  if (!session.data) return <Loading what="who you are" />;
  if (!session.data.account)
    return <Navigate to={`/sign-in?to=${encodeURIComponent(location.pathname + location.search)}`} replace />;
  return children;
}

/** A person's own pages: form type, one column. */
export function PersonLayout() {
  const session = useQuery(sessionQuery).data;
  return (
    <SignedIn>
      <div className="min-h-dvh bg-sheet">
        <SkipLink />
        <header className="flex min-h-[46px] items-center gap-4 border-b border-rule bg-sheet px-6 max-sm:px-4">
          <Link to="/home" className="quiet text-ink">
            <Wordmark />
          </Link>
          <span className="border-l border-rule pl-4 font-serif text-[14px] max-sm:hidden">
            {session?.instituteName}
          </span>
          <div className="ml-auto">
            <PersonMenu />
          </div>
        </header>
        <main id="work">
          <Outlet />
        </main>
      </div>
    </SignedIn>
  );
}

const tab = ({ isActive }: { isActive: boolean }): string =>
  `quiet flex h-10 items-center border-b-[3px] px-1 whitespace-nowrap ${isActive ? 'border-ink font-semibold text-ink' : 'border-transparent text-ink2'}`;

/** The event office's pages that belong to no event. */
export function OfficeLayout() {
  const account = useAccount();
  const demo = useQuery(sessionQuery).data?.demo;
  return (
    <SignedIn>
      <div className="min-h-dvh bg-sheet">
        <SkipLink />
        <header className="flex min-h-10 items-center gap-5 overflow-x-auto border-b border-rule bg-sheet px-6 max-sm:px-4">
          <Link to="/home" className="quiet text-ink">
            <Wordmark />
          </Link>
          <nav aria-label="Office" className="flex gap-5">
            {holds(account, 'administrator') && (
              <>
                <NavLink className={tab} to="/office/accounts">
                  Accounts
                </NavLink>
                <NavLink className={tab} to="/office/messages">
                  Messages
                </NavLink>
                <NavLink className={tab} to="/office/audit">
                  Audit trail
                </NavLink>
              </>
            )}
            {demo && (
              <NavLink className={tab} to="/office/test-mail">
                Test mail
              </NavLink>
            )}
          </nav>
          <div className="ml-auto">
            <PersonMenu />
          </div>
        </header>
        <main id="work">
          <Outlet />
        </main>
      </div>
    </SignedIn>
  );
}

/** Sections of an event's workspace, by role. */
export function sectionsFor(
  account: ReturnType<typeof useAccount>,
  eventId: string,
): { to: string; label: string }[] {
  const organiser = holds(account, 'organiser', eventId);
  const all = [
    { to: '', label: 'Overview', show: organiser || holds(account, 'finance') },
    { to: 'programme', label: 'Programme', show: organiser },
    { to: 'talks', label: 'Talks', show: organiser },
    { to: 'registrations', label: 'Registrations', show: organiser || holds(account, 'finance') },
    { to: 'grants', label: 'Grants', show: organiser || holds(account, 'reviewer', eventId) },
    { to: 'people', label: 'People', show: organiser },
    { to: 'messages', label: 'Messages', show: organiser },
    { to: 'desk', label: 'Desk', show: organiser || holds(account, 'desk', eventId) },
    { to: 'settings', label: 'Settings', show: organiser },
  ];
  return all.filter((section) => section.show);
}

/** The workspace of one event: header, run-up line, work. */
export function WorkspaceLayout() {
  const { event: slug = '' } = useParams();
  return (
    <SignedIn>
      <Workspace slug={slug} />
    </SignedIn>
  );
}

function Workspace({ slug }: { slug: string }) {
  const account = useAccount();
  const event = useQuery(eventQuery(slug));
  if (event.error)
    return (
      <div className="p-6">
        <ErrorState
          error={event.error}
          what="This event could not be opened."
          onRetry={() => void event.refetch()}
        />
      </div>
    );
  if (!event.data)
    return (
      <div className="p-6">
        <Loading what="the event" />
      </div>
    );
  return (
    <div className="flex min-h-dvh flex-col bg-sheet">
      <SkipLink />
      <header className="flex min-h-10 flex-wrap items-center gap-x-5 border-b border-rule bg-sheet px-6 max-sm:px-4">
        <Link to="/home" className="quiet text-ink">
          <Wordmark />
        </Link>
        <EventSwitcher event={event.data} />
        <nav
          aria-label="Sections"
          className="flex max-w-full gap-4 overflow-x-auto max-lg:order-last max-lg:w-full"
        >
          {sectionsFor(account, event.data.id).map((section) => (
            <NavLink
              key={section.to}
              end={section.to === ''}
              className={tab}
              to={`/organise/${slug}${section.to ? `/${section.to}` : ''}`}
            >
              {section.label}
            </NavLink>
          ))}
        </nav>
        <div className="ml-auto">
          <PersonMenu />
        </div>
      </header>
      <RunUp event={event.data} />
      <main id="work" className="flex min-h-0 grow flex-col">
        <Outlet />
      </main>
    </div>
  );
}
