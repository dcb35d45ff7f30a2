import { downloadEvidence, type MyGrant } from '@shared/features/grants/grants.contract';
import { costKindNames, formatGrant, sumOf } from '@shared/features/grants/grants.rules';
import { fileAddress } from '@/lib/api';

/** What was handed in, to read. */
export function GrantSummary({ mine }: { mine: MyGrant }) {
  const { application, currency } = mine;
  if (!application) return null;
  const items = application.input.items.filter((item) => item.amountMinor > 0);
  return (
    <section aria-label="Your application" className="mt-6">
      <h2 className="mb-2 font-serif text-title">What you asked for</h2>
      <table className="ruled row-heads">
        <caption className="sr-only">Costs asked for, in {currency}</caption>
        <tbody>
          {items.map((item) => (
            <tr key={item.kind}>
              <th scope="row">
                {costKindNames[item.kind]}
                {item.note && <span className="block font-normal text-ink3">{item.note}</span>}
              </th>
              <td className="num">{formatGrant(item.amountMinor, currency)}</td>
            </tr>
          ))}
          <tr>
            <th scope="row">Together</th>
            <td className="num font-semibold">{formatGrant(sumOf(items), currency)}</td>
          </tr>
        </tbody>
      </table>
      <p className="mt-3 font-serif whitespace-pre-wrap">{application.input.motivation}</p>
      {application.evidence.length > 0 && (
        <ul className="mt-3">
          {application.evidence.map((file) => (
            <li key={file.id}>
              <a
                href={fileAddress(downloadEvidence, { event: mine.eventSlug, evidence: file.id })}
                target="_blank"
                rel="noreferrer"
              >
                {file.fileName}
              </a>{' '}
              <span className="text-ink3">{costKindNames[file.kind]}</span>
            </li>
          ))}
        </ul>
      )}
    </section>
  );
}
