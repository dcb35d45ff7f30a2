import { useQuery } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import { PageTitle } from '@/lib/page-title';
import { MathLine } from '@/components/math-text';
import { EmptyState } from '@/components/states';
import { PublicView } from './public-view';
import { publicPeopleQuery } from './site.queries';

/** Everybody with a part in the published programme. */
export function Component() {
  const { event: slug = '' } = useParams();
  const query = useQuery(publicPeopleQuery(slug));
  return (
    <div className="px-12 py-8 max-md:px-4">
      <PublicView query={query} what="the people">
        {({ event, items }) => (
          <>
            <PageTitle text={`People: ${event.title}`} />
            <h1 className="m-0 mb-5 font-serif text-page font-medium">Speakers and lecturers</h1>
            {items.length === 0 && (
              <EmptyState title="Nobody stands here yet" fact="Names follow with the published programme." />
            )}
            {items.length > 0 && (
              <table className="ruled text-form">
                <thead className="max-md:sr-only">
                  <tr>
                    <th>Name</th>
                    <th>Talks</th>
                  </tr>
                </thead>
                <tbody>
                  {items.map((person) => (
                    <tr
                      key={person.printedName + person.affiliation}
                      className="max-md:block max-md:border-b max-md:border-rule max-md:[&>td]:block max-md:[&>td]:border-0"
                    >
                      <td className="w-[320px]">
                        <div className="font-semibold">{person.printedName}</div>
                        <div className="text-ui text-ink2">{person.affiliation}</div>
                      </td>
                      <td>
                        {person.talks.map((talk) => (
                          <div key={talk.id + talk.part}>
                            <span className="mr-2 text-ui text-ink2">
                              {talk.part === 'chair' ? `Chair, ${talk.word}` : talk.word}
                            </span>
                            <Link className="font-serif text-[16px]" to={`/events/${slug}/talks/${talk.id}`}>
                              <MathLine source={talk.title || talk.word} />
                            </Link>
                          </div>
                        ))}
                      </td>
                    </tr>
                  ))}
                </tbody>
              </table>
            )}
          </>
        )}
      </PublicView>
    </div>
  );
}
