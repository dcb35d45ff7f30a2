import type { Places } from '@shared/features/registration/registration.contract';
import { SectionHead } from '@/components/page-bar';

/** Places: paid, kept, offered, free, side by side. */
export function PlacesBar({ places, speakers }: { places: Places; speakers: number }) {
  const parts = [
    { label: 'paid', value: places.paid, look: 'bg-ink2' },
    { label: 'registered, not paid', value: places.reserved, look: 'hatch' },
    { label: 'offered', value: places.offered, look: 'bg-field' },
    { label: 'free', value: places.free, look: 'bg-sheet' },
  ];
  const whole = Math.max(
    1,
    parts.reduce((sum, part) => sum + part.value, 0),
  );
  return (
    <section className="mt-6">
      <SectionHead
        title="Places"
        aside={`${places.paid + places.reserved} of ${places.capacity} taken, ${places.waiting} waiting; ${speakers} speakers beside them`}
      />
      <div
        className="flex h-6 border border-ink"
        role="img"
        aria-label={parts.map((part) => `${part.value} ${part.label}`).join(', ')}
      >
        {parts.map(
          (part) =>
            part.value > 0 && (
              <div
                key={part.label}
                className={`${part.look} border-r border-ink last:border-r-0`}
                style={{ width: `${(part.value / whole) * 100}%` }}
              />
            ),
        )}
      </div>
      <p className="mt-2 flex flex-wrap justify-between gap-x-5 text-dense" aria-hidden="true">
        {parts.map((part) => (
          <span key={part.label}>
            <span className={`mr-1.5 inline-block size-3 border border-ink align-[-1px] ${part.look}`} />
            <b className="font-semibold">{part.value}</b> <span className="text-ink2">{part.label}</span>
          </span>
        ))}
      </p>
    </section>
  );
}
