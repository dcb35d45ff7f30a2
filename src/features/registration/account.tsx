import type { Price } from '@shared/features/finance/finance.contract';
import { formatMoney } from '@shared/lib/money';

/** The account beside the form: every line, then what is to be paid. */
export function Account({
  price,
  title = 'Your fee',
  total = 'To pay',
}: {
  price: Price;
  title?: string;
  total?: string;
}) {
  const amount = (minor: number): string => formatMoney(minor, price.currency, false);
  const note = price.taxMinor === 0 ? price.reasons.at(-1) : undefined;
  return (
    <table className="w-full text-form" aria-live="polite">
      <caption className="sr-only">{title}</caption>
      <thead>
        <tr>
          <th scope="col" className="border-b-[1.75px] border-ink pb-2 text-left font-semibold">
            {title}
          </th>
          <th scope="col" className="border-b-[1.75px] border-ink pb-2 text-right font-normal text-ink2">
            {price.currency}
          </th>
        </tr>
      </thead>
      <tbody>
        {price.lines.map((line) => (
          <tr key={line.refId}>
            <td className="border-b border-rule py-2 pr-3">
              {line.label}
              {line.note && <span className="block text-dense text-ink3">{line.note}</span>}
            </td>
            <td className="border-b border-rule py-2 text-right align-top">{amount(line.netMinor)}</td>
          </tr>
        ))}
        <tr>
          <td className="border-b border-rule py-2 pr-3">
            Tax{note && <span className="block text-dense text-ink3">{note}</span>}
          </td>
          <td className="border-b border-rule py-2 text-right align-top">{amount(price.taxMinor)}</td>
        </tr>
      </tbody>
      <tfoot>
        <tr>
          <th scope="row" className="pt-3 text-left text-[20px] font-semibold">
            {total}
          </th>
          <td className="pt-3 text-right text-[20px] font-semibold">{amount(price.totalMinor)}</td>
        </tr>
      </tfoot>
    </table>
  );
}
