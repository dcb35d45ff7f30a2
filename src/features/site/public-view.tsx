import type { ReactNode } from 'react';
import { QueryView } from '@/components/states';

/** A public page's data; where it can't be read, the page still has a heading. */
export function PublicView<T>(props: {
  query: { data: T | undefined; error: unknown; isPending: boolean; refetch: () => unknown };
  what: string;
  children: (data: T) => ReactNode;
}) {
  if (props.query.data !== undefined || !props.query.error) return <QueryView {...props} />;
  return (
    <div className="px-12 py-10 max-md:px-4">
      <h1 className="m-0 mb-4 font-serif text-page font-medium">This page can’t be shown</h1>
      <QueryView {...props} />
    </div>
  );
}
