import { useQuery } from '@tanstack/react-query';
import { lazy, Suspense } from 'react';
import { useParams } from 'react-router-dom';
import { Loading, QueryView } from '@/components/states';
import { draftOf } from './programme.queries';

/** FullCalendar weighs more than everything else on this page: it is loaded with the composer only. */
const Composer = lazy(async () => ({ default: (await import('./composer')).Composer }));

export function Component() {
  const { event = '' } = useParams();
  const draft = useQuery(draftOf(event));
  return (
    <QueryView query={draft} what="the programme">
      {(data) => (
        <Suspense fallback={<Loading what="the calendar" />}>
          <Composer key={data.event.slug} draft={data} />
        </Suspense>
      )}
    </QueryView>
  );
}
