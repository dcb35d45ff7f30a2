import { useQuery } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import type { PublicTalkPage } from '@shared/features/site/site.contract';
import { formatSpan } from '@shared/lib/time';
import { PageTitle } from '@/lib/page-title';
import { KindTag } from '@/components/kind-tag';
import { MathLine, MathText } from '@/components/math-text';
import { plainLatex } from '@shared/lib/latex';
import { PublicView } from './public-view';
import { publicTalkQuery } from './site.queries';

const partWords = { speaker: '', chair: 'chair', tutor: 'exercises' } as const;

/** A talk of the published programme with its abstract. */
export function Component() {
  const { event = '', talk = '' } = useParams();
  const query = useQuery(publicTalkQuery(event, talk));
  return (
    <article className="max-w-[780px] px-12 py-8 max-md:px-4">
      <PublicView query={query} what="the talk">
        {(shown) => <Talk talk={shown} />}
      </PublicView>
    </article>
  );
}

function Talk({ talk }: { talk: PublicTalkPage }) {
  const { event, placement } = talk;
  return (
    <>
      <PageTitle text={`${plainLatex(talk.title) || talk.word}: ${event.title}`} />
      <p className="m-0 mb-3 text-form">
        <Link to={`/events/${event.slug}/programme`}>{event.title}</Link>
      </p>
      <p className="m-0 text-form">
        <KindTag kind={talk.kind} label={talk.word} />
        <span className="ml-4 text-ink2">
          {formatSpan(placement.startsAt, placement.endsAt, event.timeZone)}, {placement.roomName}
        </span>
      </p>
      <h1 className="my-2 font-serif text-[34px] leading-10 font-medium max-md:text-[26px] max-md:leading-8">
        <MathLine source={talk.title || talk.word} />
      </h1>
      <ul className="m-0 mb-5 list-none p-0 text-form leading-6">
        {talk.people.map((person) => (
          <li key={person.printedName + person.part}>
            <span className="font-semibold">{person.printedName}</span>
            {person.affiliation && <span className="text-ink2">, {person.affiliation}</span>}
            {partWords[person.part] && <span className="text-ink3"> ({partWords[person.part]})</span>}
          </li>
        ))}
        {talk.coAuthors.length > 0 && (
          <li className="text-ink2">
            with{' '}
            {talk.coAuthors
              .map((person) => [person.name, person.affiliation].filter(Boolean).join(', '))
              .join('; ')}
          </li>
        )}
      </ul>
      {talk.abstract ? (
        <MathText source={talk.abstract} />
      ) : (
        <p className="text-ink2">The abstract is not in yet.</p>
      )}
      {talk.msc.length > 0 && <p className="mt-4 text-ui text-ink2">MSC 2020: {talk.msc.join(', ')}</p>}
      {talk.references.length > 0 && (
        <>
          <h2 className="mt-5 mb-1 text-form font-semibold">References</h2>
          <ul className="m-0 pl-5 text-ui">
            {talk.references.map((reference) => (
              <li key={reference}>{reference}</li>
            ))}
          </ul>
        </>
      )}
    </>
  );
}
