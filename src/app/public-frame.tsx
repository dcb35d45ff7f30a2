import { useQuery } from '@tanstack/react-query';
import { lazy, Suspense } from 'react';
import { Link, Outlet } from 'react-router-dom';
import { sessionQuery } from '@/features/accounts/accounts.queries';
import { Wordmark } from '@/components/mark';
import { EventNav } from './event-nav';
import { SkipLink } from './skip-link';

// Strangers never see the menu: its code stays away from their first load.
const PersonMenu = lazy(async () => ({ default: (await import('./person-menu')).PersonMenu }));

/** Public pages: the institute's name, no workspace. */
export function PublicLayout() {
  const session = useQuery(sessionQuery).data;
  return (
    <div className="flex min-h-dvh flex-col bg-sheet text-form">
      <SkipLink />
      <header className="flex min-h-[56px] flex-wrap items-center gap-x-8 border-b border-rule px-12 max-md:px-4">
        <Link to="/" className="quiet font-serif text-[16px] font-semibold text-ink">
          {session?.instituteName ?? 'Analemma'}
        </Link>
        <EventNav />
        <div className="ml-auto">
          {session?.account ? (
            <Suspense>
              <PersonMenu />
            </Suspense>
          ) : (
            <Link to="/sign-in">Sign in</Link>
          )}
        </div>
      </header>
      <main id="work" className="grow">
        <Outlet />
      </main>
      <footer className="flex items-center gap-3 border-t border-rule bg-paper px-12 py-3 text-ui text-ink3 max-md:px-4">
        <span>Set with</span>
        <Wordmark height={18} />
      </footer>
    </div>
  );
}
