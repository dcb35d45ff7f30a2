import { NavLink, useLocation } from 'react-router-dom';

const entry = ({ isActive }: { isActive: boolean }): string =>
  `quiet py-1 whitespace-nowrap ${isActive ? 'font-semibold text-ink' : 'text-ink2'}`;

/** Pages of one event in the header of the public site; nothing elsewhere. */
export function EventNav() {
  const slug = /^\/events\/([^/]+)/.exec(useLocation().pathname)?.[1];
  if (!slug) return null;
  return (
    <nav
      aria-label="Event"
      className="flex gap-6 overflow-x-auto text-form max-md:order-last max-md:w-full max-md:pb-2"
    >
      <NavLink end className={entry} to={`/events/${slug}`}>
        Event
      </NavLink>
      <NavLink className={entry} to={`/events/${slug}/programme`}>
        Programme
      </NavLink>
      <NavLink className={entry} to={`/events/${slug}/people`}>
        People
      </NavLink>
    </nav>
  );
}
