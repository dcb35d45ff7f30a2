import { formatGrant } from '@shared/features/grants/grants.rules';
import type { FunderView } from '@shared/features/grants/grants-funder.contract';
import { count } from '@shared/lib/text';
import { formatDate, formatDateSpan, formatInstant, instantToLocal } from '@shared/lib/time';
import { Sign } from '@/components/sign';
import { FundBar } from './money-cell';

/** The committee's letter to the funder: what is asked, how much, and the fund's own conditions checked. */
export function FunderLetter({ fund }: { fund: FunderView }) {
  const money = (amount: number, withCode = true) => formatGrant(amount, fund.currency, withCode);
  const held = fund.awards.filter((award) => award.state !== 'returned').length;
  const left = fund.budgetMinor - fund.awardedMinor;
  return (
    <section
      aria-label="Letter"
      className="border-rule bg-paper px-12 py-9 lg:min-h-full lg:border-r max-sm:px-4 max-sm:py-6"
    >
      <p className="text-ink3">
        {fund.instituteName}
        <br />
        {formatDate(instantToLocal(new Date(), fund.timeZone).date, { year: true, weekday: false })}
      </p>
      <h1 className="mt-3 font-serif text-[28px] leading-[34px]">Awards proposed to {fund.name}</h1>
      <p className="mt-2 font-serif text-[18px] leading-6 text-ink2">
        {fund.eventTitle}, {formatDateSpan(fund.startsOn, fund.endsOn)}.
      </p>
      <p className="mt-4 text-form">
        The committee proposes <b>{count(held, 'award')}</b>, together <b>{money(fund.awardedMinor)}</b> of
        the {money(fund.budgetMinor)} you granted.{' '}
        {fund.decideBy ? (
          <>
            Please approve or query each by{' '}
            <b>
              {formatInstant(fund.decideBy, fund.timeZone, false)} ({fund.town})
            </b>
            .
          </>
        ) : (
          'Please approve or query each.'
        )}
      </p>
      <div className="mt-3">
        <FundBar
          givenMinor={fund.awardedMinor}
          budgetMinor={fund.budgetMinor}
          label={`${money(fund.awardedMinor)} proposed of ${money(fund.budgetMinor)}`}
        />
        <p className="mt-1 flex justify-between">
          <span>
            <b>{money(fund.awardedMinor, false)}</b> proposed
          </span>
          <span>
            <b>{money(left, false)}</b> left
          </span>
        </p>
      </div>
      <h2 className="mt-6 border-b-[1.75px] border-ink pb-2 font-semibold">Your conditions, checked</h2>
      <ul>
        {fund.conditions.map((condition) => (
          <li key={condition.text} className="flex gap-2 border-b border-rule py-2">
            <Sign kind={condition.met ? 'good' : 'wish'} label={condition.met ? 'Met' : 'Not met'} />
            <span>
              {condition.text}
              {condition.fact && <b>: {condition.fact}</b>}
              {!condition.met && <span className="text-caution"> (not met yet)</span>}
            </span>
          </li>
        ))}
      </ul>
      <p className="mt-5 text-dense text-ink3">
        You see references, career stages and regions (United Nations M49). Names, institutes and documents
        stay with the committee.
      </p>
      <p className="mt-3 text-dense text-ink3">
        Questions: <a href={`mailto:${fund.contactEmail}`}>{fund.contactEmail}</a>
      </p>
    </section>
  );
}
