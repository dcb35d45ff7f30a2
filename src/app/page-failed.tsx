import { isRouteErrorResponse, useRouteError } from 'react-router-dom';
import { ErrorState } from '@/components/states';

/** What is shown when a page breaks: nothing saved is lost, and one thing to do. */
export function PageFailed() {
  const error = useRouteError();
  return (
    <main className="mx-auto max-w-xl p-8">
      <ErrorState
        error={isRouteErrorResponse(error) ? undefined : error}
        what="This page broke."
        onRetry={() => window.location.reload()}
      />
    </main>
  );
}
