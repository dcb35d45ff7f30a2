import { Link } from 'react-router-dom';
import { Wordmark } from '@/components/mark';

export function Component() {
  return (
    <main className="mx-auto max-w-xl px-6 py-16">
      <Wordmark />
      <h1 className="mt-8 font-serif text-page">There is no page here</h1>
      <p className="mt-2 text-form text-ink2">
        The address may be mistyped, or the page is not yours to see. Signing in may help.
      </p>
      <p className="mt-6 flex gap-6 text-form">
        <Link to="/">Events</Link>
        <Link to="/sign-in">Sign in</Link>
      </p>
    </main>
  );
}
