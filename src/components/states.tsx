import { useEffect, useState, type ReactNode } from 'react';
import { Problem } from '@shared/http/problem';
import { Button } from './button';
import { Sign } from './sign';

/** One serif sentence, the fact that makes it trustworthy, then the first action if there is one. */
export function EmptyState({ title, fact, action }: { title: string; fact?: ReactNode; action?: ReactNode }) {
  return (
    <div className="py-8">
      <p className="font-serif text-[18px] leading-6">{title}</p>
      {fact && <p className="mt-1 text-ink3">{fact}</p>}
      {action && <div className="mt-4">{action}</div>}
    </div>
  );
}

/** Still bars after 300 ms; after 5 s says what takes long. */
export function Loading({ what, lines = 5 }: { what: string; lines?: number }) {
  const [stage, setStage] = useState(0);
  useEffect(() => {
    const soon = setTimeout(() => setStage(1), 300);
    const late = setTimeout(() => setStage(2), 5000);
    return () => {
      clearTimeout(soon);
      clearTimeout(late);
    };
  }, []);
  if (stage === 0) return <div aria-busy="true" className="min-h-24" />;
  return (
    <div role="status" aria-busy="true" className="py-4">
      <p className="text-ink3">
        {stage === 2 ? `Still reading ${what}. The server is slow or far away.` : `Reading ${what} …`}
      </p>
      {Array.from({ length: lines }, (_, i) => (
        <div key={i} className="mt-2 h-4 bg-wash" style={{ width: `${88 - ((i * 17) % 40)}%` }} />
      ))}
    </div>
  );
}

/** What did not happen, what is safe, one action. */
export function ErrorState({
  error,
  onRetry,
  what,
}: {
  error: unknown;
  onRetry?: () => void;
  what?: string;
}) {
  const problem = error instanceof Problem ? error : undefined;
  const requestId = problem?.facts?.requestId;
  return (
    <div role="alert" className="flex items-start gap-2.5 bg-alarmwash px-3 py-2.5">
      <Sign kind="must" />
      <div>
        <p className="font-semibold text-ink">{what ?? 'This could not be shown.'}</p>
        <p className="text-ink2">
          {problem?.message ?? 'Something went wrong in this page. What was saved is safe.'}
        </p>
        {typeof requestId === 'string' && (
          <p className="text-dense text-ink3">Number for the office: {requestId}</p>
        )}
        {onRetry && (
          <Button className="mt-2" onClick={onRetry}>
            Try again
          </Button>
        )}
      </div>
    </div>
  );
}

/** Loading, error or the data of a query. */
export function QueryView<T>({
  query,
  what,
  children,
}: {
  query: { data: T | undefined; error: unknown; isPending: boolean; refetch: () => unknown };
  what: string;
  children: (data: T) => ReactNode;
}) {
  if (query.data !== undefined) return <>{children(query.data)}</>;
  if (query.error)
    return (
      <ErrorState
        error={query.error}
        what={`Reading ${what} did not work.`}
        onRetry={() => void query.refetch()}
      />
    );
  return <Loading what={what} />;
}

/** A coloured note with a sign: what is worth knowing before acting. */
export function Note({ kind = 'wish', children }: { kind?: 'must' | 'wish' | 'good'; children: ReactNode }) {
  const ground = { must: 'bg-alarmwash', wish: 'bg-cautionwash', good: 'bg-goodwash' }[kind];
  return (
    <div className={`flex items-start gap-2.5 px-3 py-2 text-dense text-ink ${ground}`}>
      <Sign kind={kind} />
      <div>{children}</div>
    </div>
  );
}
