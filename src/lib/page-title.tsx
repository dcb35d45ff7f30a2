import { useEffect } from 'react';

/** The browser's title while a page is shown. The element of index.html is changed, so there is always exactly one. */
export function PageTitle({ text }: { text: string }) {
  useEffect(() => {
    document.title = text;
    return () => {
      document.title = 'Analemma';
    };
  }, [text]);
  return null;
}
