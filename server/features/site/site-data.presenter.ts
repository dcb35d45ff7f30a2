import type { PublicEvent, PublicPeople } from '@shared/features/site/site.contract';
import { exponentOf } from '@shared/lib/money';

/** Minor units as the plain decimal number that schema.org asks for. */
function decimal(amountMinor: number, currency: string): string {
  const digits = exponentOf(currency);
  const padded = String(amountMinor).padStart(digits + 1, '0');
  return digits === 0 ? padded : `${padded.slice(0, -digits)}.${padded.slice(-digits)}`;
}

/** The event in the words of schema.org `Event`; public fields only. */
export function eventData(
  event: PublicEvent,
  speakers: PublicPeople['items'],
  site: { address: string; instituteName: string },
): Record<string, unknown> {
  const { registration } = event;
  const url = `${site.address}/events/${event.slug}`;
  return {
    '@context': 'https://schema.org',
    '@type': 'Event',
    name: event.title,
    description: event.lead,
    startDate: event.startsOn,
    endDate: event.endsOn,
    url,
    eventStatus: 'https://schema.org/EventScheduled',
    eventAttendanceMode: 'https://schema.org/OfflineEventAttendanceMode',
    maximumAttendeeCapacity: registration.capacity,
    location: {
      '@type': 'Place',
      name: event.venue,
      address: { '@type': 'PostalAddress', addressLocality: event.town },
    },
    organizer: { '@type': 'Organization', name: site.instituteName, url: site.address },
    performer: speakers.map((one) => ({
      '@type': 'Person',
      name: one.printedName,
      ...(one.affiliation && { affiliation: { '@type': 'Organization', name: one.affiliation } }),
    })),
    ...(registration.feeNow && {
      offers: {
        '@type': 'AggregateOffer',
        url: `${url}/register`,
        lowPrice: decimal(registration.feeNow.leastMinor, registration.currency),
        highPrice: decimal(registration.feeNow.mostMinor, registration.currency),
        priceCurrency: registration.currency,
        availability:
          registration.open && registration.free > 0
            ? 'https://schema.org/InStock'
            : 'https://schema.org/SoldOut',
      },
    }),
  };
}

const AS_ESCAPE: Record<string, string> = {
  '<': '\\u003c',
  '>': '\\u003e',
  '&': '\\u0026',
  '\u2028': '\\u2028',
  '\u2029': '\\u2029',
};

/** JSON that can stand inside a script element: nothing in it can end the element. */
export const scriptSafeJson = (data: unknown): string =>
  JSON.stringify(data).replace(/[<>&\u2028\u2029]/g, (sign) => AS_ESCAPE[sign] as string);
