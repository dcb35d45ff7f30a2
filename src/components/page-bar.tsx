import type { ReactNode } from 'react';

/** Head of a working page: title, facts, then controls and the one action that stands out. */
export function PageBar({
  title,
  facts,
  controls,
  actions,
}: {
  title: string;
  facts?: ReactNode;
  controls?: ReactNode;
  actions?: ReactNode;
}) {
  return (
    <div className="flex min-h-[48px] flex-wrap items-center gap-x-4 gap-y-2 border-b border-rule bg-sheet px-6 py-2 max-sm:px-4">
      <h1 className="font-serif text-title">{title}</h1>
      {facts && <p className="text-ink2">{facts}</p>}
      {controls}
      {actions && <div className="ml-auto flex flex-wrap items-center gap-2.5">{actions}</div>}
    </div>
  );
}

/** Head of a section: ink rule above, title left, a link or fact right. */
export function SectionHead({
  title,
  aside,
  level = 2,
}: {
  title: ReactNode;
  aside?: ReactNode;
  level?: 2 | 3;
}) {
  const Heading = level === 2 ? 'h2' : 'h3';
  return (
    <div className="mb-2 flex items-baseline justify-between gap-3">
      <Heading className="font-semibold">{title}</Heading>
      {aside && <div className="text-dense text-ink3">{aside}</div>}
    </div>
  );
}

/** Label and value, line by line. */
export function Facts({
  items,
}: {
  items: readonly (readonly [label: string, value: ReactNode] | null | false)[];
}) {
  return (
    <dl className="grid grid-cols-[minmax(88px,auto)_1fr] gap-x-4 gap-y-1 text-dense">
      {items.map(
        (item) =>
          item && (
            <div key={item[0]} className="contents">
              <dt className="text-ink3">{item[0]}</dt>
              <dd className="min-w-0 break-words">{item[1]}</dd>
            </div>
          ),
      )}
    </dl>
  );
}
