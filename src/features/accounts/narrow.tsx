import type { ReactNode } from 'react';

/** One column for a short form. */
export function Narrow({ title, lead, children }: { title: string; lead?: ReactNode; children: ReactNode }) {
  return (
    <div className="mx-auto max-w-[480px] px-4 py-12 text-form">
      <h1 className="font-serif text-page">{title}</h1>
      {lead && <p className="mt-2 text-ink2">{lead}</p>}
      <div className="mt-6">{children}</div>
    </div>
  );
}
