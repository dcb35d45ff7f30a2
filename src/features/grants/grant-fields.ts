import {
  costKinds,
  type CostKind,
  type GrantInput,
  type MyGrant,
} from '@shared/features/grants/grants.contract';
import { formatGrant } from '@shared/features/grants/grants.rules';
import { parseMinor } from '@shared/lib/money';

export interface CostFields {
  amount: string;
  quantity: string;
  note: string;
}
export interface GrantFields {
  costs: Record<CostKind, CostFields>;
  least: string;
  motivation: string;
  talkId: string;
  firstMeeting: boolean;
  noOtherMoney: boolean;
}

/** Kinds counted in nights or days. */
export const countedIn: Partial<Record<CostKind, string>> = { accommodation: 'Nights', subsistence: 'Days' };

export function fieldsOf(mine: MyGrant): GrantFields {
  const input = mine.application?.input;
  const plain = (amount: number | undefined) =>
    amount ? formatGrant(amount, mine.currency, false).replace(/,/g, '') : '';
  const costs = Object.fromEntries(
    costKinds.map((kind) => {
      const item = input?.items.find((candidate) => candidate.kind === kind);
      return [
        kind,
        {
          amount: plain(item?.amountMinor),
          quantity: item?.quantity?.toString() ?? '',
          note: item?.note ?? '',
        },
      ];
    }),
  ) as Record<CostKind, CostFields>;
  return {
    costs,
    least: plain(input?.minUsefulMinor),
    motivation: input?.motivation ?? '',
    talkId: input?.talkId ?? '',
    firstMeeting: input?.firstMeeting ?? false,
    noOtherMoney: input?.noOtherMoney ?? false,
  };
}

/** The body of a save, or the fields that can't be read. `order[n]` is the kind that the server calls items.n. */
export function inputOf(
  fields: GrantFields,
  currency: string,
): { input: GrantInput; order: CostKind[]; errors: Record<string, string> } {
  const errors: Record<string, string> = {};
  const amount = (text: string, key: string): number => {
    const minor = text.trim() === '' ? 0 : parseMinor(text, currency);
    if (minor !== undefined && minor >= 0) return minor;
    errors[key] = 'Write a sum like 980 or 980.50.';
    return 0;
  };
  const order = costKinds.filter((kind) => fields.costs[kind].amount.trim() !== '');
  const items = order.map((kind) => {
    const { amount: text, quantity, note } = fields.costs[kind];
    const n = Number(quantity);
    if (quantity.trim() !== '' && !(Number.isInteger(n) && n >= 1 && n <= 120))
      errors[`${kind}.quantity`] = 'A whole number from 1 to 120.';
    return {
      kind,
      amountMinor: amount(text, `${kind}.amount`),
      quantity: countedIn[kind] && quantity.trim() && !errors[`${kind}.quantity`] ? n : null,
      note,
    };
  });
  const { motivation, firstMeeting, noOtherMoney } = fields;
  return {
    input: {
      motivation,
      firstMeeting,
      noOtherMoney,
      talkId: fields.talkId || null,
      items,
      minUsefulMinor: amount(fields.least, 'least'),
    },
    order,
    errors,
  };
}

/** The server's field errors under the names that this form uses. */
export function ownErrors(
  errors: Record<string, string>,
  order: readonly CostKind[],
): Record<string, string> {
  return Object.fromEntries(
    Object.entries(errors).map(([path, text]) => {
      const match = /^items\.(\d+)\.(\w+)$/.exec(path);
      const kind = match && order[Number(match[1])];
      if (kind)
        return [`${kind}.${match[2] === 'amountMinor' || match[2] === 'kind' ? 'amount' : match[2]}`, text];
      return [path === 'minUsefulMinor' ? 'least' : path, text];
    }),
  );
}
