import type { RegistrationInput } from '../../shared/features/registration/registration.contract';
import { replaceFeeTable } from '../../server/features/finance/finance.service';
import { systemActor } from '../../server/features/accounts/accounts.service';
import { changeEventState } from '../../server/features/events/events.service';
import type { EventInput } from '../../shared/features/events/events.contract';
import { buildEvent } from './build-events';

/** An event that is open for registration, with a fee of 250.00 EUR and a dinner with 5 pieces at 40.00. */
export async function buildOpenEvent(over: Partial<EventInput> = {}) {
  const event = await buildEvent(over);
  const fees = await replaceFeeTable(systemActor, event.slug, {
    taxNote: 'Exempt: education.',
    categories: [
      {
        name: 'Everybody',
        stages: [],
        earlyMinor: null,
        earlyUntil: null,
        regularMinor: 25_000,
        taxBasisPoints: 0,
      },
    ],
    extras: [{ name: 'Dinner', priceMinor: 4_000, capacity: 5, until: null, taxBasisPoints: 0, hint: '' }],
  });
  const open = await changeEventState(systemActor, event.slug, 'open');
  return { event: open, fees, category: fees.categories[0]?.id ?? '', dinner: fees.extras[0]?.id ?? '' };
}

export const registrationInput = (
  categoryId: string,
  over: Partial<RegistrationInput> = {},
): RegistrationInput => ({
  categoryId,
  extras: [],
  arrivesOn: '2027-07-05',
  leavesOn: '2027-07-07',
  badgeName: 'M. Ås',
  diet: 'vegetarian',
  allergies: '',
  needs: '',
  invoice: {
    payer: 'self',
    name: 'Mira Ås',
    street: '',
    postcode: '',
    town: '',
    country: null,
    vatNumber: '',
    orderNumber: '',
  },
  consent: true,
  ...over,
});
