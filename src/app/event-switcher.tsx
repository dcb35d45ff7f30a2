import { useQuery } from '@tanstack/react-query';
import { DropdownMenu } from 'radix-ui';
import { Link } from 'react-router-dom';
import type { EventDetail } from '@shared/features/events/events.contract';
import { eventStateNames } from '@shared/features/events/events.rules';
import { formatDateSpan } from '@shared/lib/time';
import { myEventsQuery } from '@/features/events/events.queries';

/** The event's short title; opens the list of events that this person works on. */
export function EventSwitcher({ event }: { event: EventDetail }) {
  const mine = useQuery(myEventsQuery).data?.items ?? [];
  return (
    <DropdownMenu.Root>
      <DropdownMenu.Trigger className="flex min-h-[28px] items-center gap-2 border-l border-rule pl-4 font-serif text-[14px] font-semibold whitespace-nowrap">
        {event.shortTitle}
        <span aria-hidden="true" className="text-ink3">
          ⌄
        </span>
        <span className="sr-only">Change event</span>
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align="start"
          sideOffset={6}
          className="z-50 max-h-[70dvh] max-w-[92vw] overflow-y-auto border-[1.75px] border-ink bg-sheet py-1 shadow-float"
        >
          {mine.map((item) => (
            <DropdownMenu.Item key={item.id} asChild>
              <Link
                to={`/organise/${item.slug}`}
                className="quiet block px-4 py-1.5 text-ui text-ink outline-none data-highlighted:bg-actwash"
              >
                <span className="block font-serif text-[14px] font-semibold">{item.shortTitle}</span>
                <span className="text-dense text-ink3">
                  {formatDateSpan(item.startsOn, item.endsOn)} · {eventStateNames[item.state]}
                </span>
              </Link>
            </DropdownMenu.Item>
          ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
