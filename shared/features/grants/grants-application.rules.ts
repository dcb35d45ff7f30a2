import type { CostKind, GrantInput } from './grants.contract';
import { costKindNames, formatGrant, sumOf } from './grants.rules';

export interface GrantDoor {
  eventState: string;
  hasBasis: boolean;
  dueAt: string | null;
}

/** Why no grant application can be handed in now; null when it can. */
export function grantClosedBecause({ eventState, hasBasis, dueAt }: GrantDoor, now: Date): string | null {
  if (!['announced', 'open', 'running'].includes(eventState)) return 'The event is over, or not open yet.';
  if (dueAt && now.toISOString() > dueAt) return 'The date for grant applications is past.';
  if (!hasBasis)
    return 'A grant belongs to a registration. Register or apply for a place first, then come back here.';
  return null;
}

/** What keeps a draft from being handed in, keyed by field; empty when nothing does. */
export function submissionErrors(
  input: GrantInput,
  facts: {
    coveredKinds: readonly CostKind[];
    currency: string;
    country: string | null;
    careerStage: string | null;
  },
): Record<string, string> {
  const errors: Record<string, string> = {};
  if (input.motivation.trim().length < 40)
    errors.motivation = `Write at least 40 characters; there are ${input.motivation.trim().length}.`;
  const asked = input.items.filter((item) => item.amountMinor > 0);
  if (asked.length === 0) errors.items = 'Ask for at least one cost.';
  input.items.forEach((item, index) => {
    if (input.items.findIndex((other) => other.kind === item.kind) < index)
      errors[`items.${index}.kind`] = `${costKindNames[item.kind]} stands there twice.`;
    if (item.amountMinor > 0 && facts.coveredKinds.length > 0 && !facts.coveredKinds.includes(item.kind))
      errors[`items.${index}.amountMinor`] =
        `No fund of this event pays ${costKindNames[item.kind].toLowerCase()}.`;
    if (item.amountMinor > 0 && item.kind === 'accommodation' && item.quantity === null)
      errors[`items.${index}.quantity`] = 'Say how many nights.';
  });
  const total = sumOf(asked);
  if (input.minUsefulMinor > total)
    errors.minUsefulMinor = `This is more than the ${formatGrant(total, facts.currency)} that you ask for.`;
  if (!facts.country) errors.country = 'Your profile needs the country of your affiliation.';
  if (!facts.careerStage) errors.careerStage = 'Your profile needs your career stage.';
  return errors;
}
