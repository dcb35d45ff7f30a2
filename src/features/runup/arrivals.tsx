import type { Overview } from '@shared/features/runup/runup.contract';
import { formatDate } from '@shared/lib/time';
import { SectionHead } from '@/components/page-bar';

/** People by day of arrival: real = solid, not said = hatched; the value on the bar. */
export function Arrivals({ arrivals }: { arrivals: Overview['arrivals'] }) {
  const all = arrivals.reduce((sum, row) => sum + row.people, 0);
  const said = arrivals.filter((row) => row.on !== null).reduce((sum, row) => sum + row.people, 0);
  const most = Math.max(1, ...arrivals.map((row) => row.people));
  // More than six days: the earliest five, then together.
  const days = arrivals.filter((row) => row.on !== null);
  const shown =
    days.length > 5
      ? [
          ...days.slice(0, 4),
          { on: 'later', people: days.slice(4).reduce((sum, row) => sum + row.people, 0) },
        ]
      : days;
  const silent = arrivals.find((row) => row.on === null);
  const bars = silent ? [...shown, silent] : shown;
  return (
    <section>
      <SectionHead title="Arrivals" aside={all > 0 && `${said} of ${all} have said when`} />
      {all === 0 ? (
        <p className="text-ink3">Nobody has registered yet.</p>
      ) : (
        <div
          className="flex h-[170px] items-end gap-3 border-b border-ink"
          role="img"
          aria-label={bars.map((row) => `${label(row.on)}: ${row.people}`).join(', ')}
        >
          {bars.map((row) => (
            <div key={row.on ?? 'silent'} className="flex min-w-0 grow flex-col items-center">
              <b className="text-dense font-semibold">{row.people}</b>
              <div
                className={`w-full max-w-[40px] ${row.on === null ? 'hatch border border-field' : 'bg-ink2'}`}
                style={{
                  height: Math.max(2, (row.people / Math.max(most, ...bars.map((bar) => bar.people))) * 130),
                }}
              />
            </div>
          ))}
        </div>
      )}
      <div className="flex gap-3 pt-1" aria-hidden="true">
        {bars.map((row) => (
          <span key={row.on ?? 'silent'} className="min-w-0 grow text-center text-tile text-ink3">
            {label(row.on)}
          </span>
        ))}
      </div>
    </section>
  );
}

const label = (on: string | null): string =>
  on === null
    ? 'not said'
    : on === 'later'
      ? 'later'
      : formatDate(on, { short: true }).replace(/ [A-Z][a-z]+$/, '');
