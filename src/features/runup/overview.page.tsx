import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import type { Duty, Overview } from '@shared/features/runup/runup.contract';
import { talkKindNames } from '@shared/features/talks/talks.rules';
import { dietNames } from '@shared/features/registration/registration.rules';
import { formatDate } from '@shared/lib/time';
import { LinkButton } from '@/components/button';
import { SectionHead } from '@/components/page-bar';
import { EmptyState, QueryView } from '@/components/states';
import { ownTime } from '@/lib/format';
import { eventQuery } from '@/features/events/events.queries';
import { Arrivals } from './arrivals';
import { Income } from './income';
import { PlacesBar } from './places-bar';
import { overviewQuery } from './runup.queries';

export function Component() {
  const { event = '' } = useParams();
  const query = useQuery(overviewQuery(event));
  const detail = useQuery(eventQuery(event)).data;
  return (
    <QueryView query={query} what="the overview">
      {(overview) => (
        <div className="grid grow xl:grid-cols-[780fr_660fr]">
          <div className="bg-sheet px-6 py-4 max-sm:px-4">
            <Attention duties={overview.duties} />
            <div className="mt-5 grid gap-8 md:grid-cols-[300px_1fr]">
              <Arrivals arrivals={overview.arrivals} />
              <Log log={overview.log} />
            </div>
          </div>
          <div className="border-l border-rule bg-paper px-10 py-6 max-sm:px-4">
            {detail && <Income money={overview.money} event={detail} />}
            <PlacesBar places={overview.places} speakers={overview.speakers} />
            <div className="mt-6 grid gap-x-10 gap-y-6 md:grid-cols-2">
              <Abstracts abstracts={overview.abstracts} />
              <Meals meals={overview.meals} />
            </div>
          </div>
        </div>
      )}
    </QueryView>
  );
}

function Attention({ duties }: { duties: Duty[] }) {
  const soon = duties.filter((duty) => duty.soon).length;
  return (
    <section aria-labelledby="attention">
      <div className="flex items-baseline gap-4 border-b-[1.75px] border-ink pb-2.5">
        <h1 id="attention" className="font-serif text-title">
          What needs attention
        </h1>
        {duties.length > 0 && (
          <p className="text-ink2">
            {soon} this week, {duties.length - soon} later
          </p>
        )}
      </div>
      {duties.length === 0 ? (
        <EmptyState
          title="Nothing is due."
          fact={`Looked at ${new Date().toTimeString().slice(0, 5)}: talks, programme, registrations, payments, grants, letters.`}
        />
      ) : (
        <ol className="border-b-[1.75px] border-ink">
          {duties.map((duty, index) => (
            <li
              key={duty.key}
              className="grid min-h-[54px] grid-cols-[20px_92px_1fr_auto] items-center gap-x-3 border-b border-rule py-1.5 last:border-b-0 max-sm:grid-cols-[20px_1fr]"
            >
              <span className="font-serif text-[16px]">{index + 1}</span>
              <span className={duty.soon ? 'font-semibold text-alarm' : 'text-ink3'}>
                {duty.by ? formatDate(duty.by, { short: true }) : 'No date'}
              </span>
              <span className="min-w-0 max-sm:col-start-2">
                <b className="block font-semibold">{duty.title}</b>
                <span className="text-dense text-ink2">{duty.detail}</span>
              </span>
              <LinkButton
                to={duty.href}
                variant={index === 0 && duty.soon ? 'primary' : 'secondary'}
                className="min-w-[104px] max-sm:col-start-2 max-sm:justify-self-start"
              >
                {duty.action}
              </LinkButton>
            </li>
          ))}
        </ol>
      )}
    </section>
  );
}

/** `registration.checked_in` as words. */
const spoken = (what: string): string => {
  const [feature = '', verb = ''] = what.split('.');
  return `${feature}: ${verb.replaceAll('_', ' ')}`;
};

function Log({ log }: { log: Overview['log'] }) {
  return (
    <section>
      <SectionHead title="Since yesterday" />
      {log.length === 0 ? (
        <p className="text-ink3">Nothing has changed.</p>
      ) : (
        <table className="ruled text-dense">
          <tbody>
            {log.map((row) => (
              <tr key={row.id}>
                <td className="w-28 whitespace-nowrap text-ink3">{ownTime(row.at)}</td>
                <td>
                  <b className="font-semibold">{row.who}</b> {spoken(row.what)}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </section>
  );
}

function Abstracts({ abstracts }: { abstracts: Overview['abstracts'] }) {
  const sum = (pick: 'handedIn' | 'missing'): number =>
    abstracts.reduce((total, row) => total + row[pick], 0);
  return (
    <section>
      <SectionHead title="Abstracts" />
      <table className="ruled text-dense">
        <thead>
          <tr>
            <th scope="col">
              <span className="sr-only">Kind</span>
            </th>
            <th scope="col" className="num">
              In
            </th>
            <th scope="col" className="num">
              Missing
            </th>
          </tr>
        </thead>
        <tbody>
          {abstracts.map((row) => (
            <tr key={row.kind}>
              <td>{talkKindNames[row.kind]}</td>
              <td className="num">{row.handedIn}</td>
              <td className={`num ${row.missing > 0 ? 'font-semibold' : 'text-ink3'}`}>{row.missing}</td>
            </tr>
          ))}
          <tr>
            <td className="border-t border-ink">Together</td>
            <td className="num border-t border-ink font-semibold">{sum('handedIn')}</td>
            <td className="num border-t border-ink font-semibold">{sum('missing')}</td>
          </tr>
        </tbody>
      </table>
    </section>
  );
}

function Meals({ meals }: { meals: Overview['meals'] }) {
  const together = meals.diets.reduce((total, row) => total + row.people, 0);
  return (
    <section>
      <SectionHead title="Food" aside={`${together} registered`} />
      <table className="ruled text-dense">
        <tbody>
          {meals.diets.map((row) => (
            <tr key={row.diet}>
              <td>{dietNames[row.diet]}</td>
              <td className="num">{row.people}</td>
            </tr>
          ))}
          <tr>
            <td className="border-t border-ink">Allergies noted</td>
            <td className="num border-t border-ink font-semibold">{meals.allergies}</td>
          </tr>
        </tbody>
      </table>
      <p className="mt-1 text-tile text-ink3">
        Counts are not a safety measure: the kitchen confirms allergens with the person.
      </p>
    </section>
  );
}
