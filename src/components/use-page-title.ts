import { useEffect } from 'react';

/** Title of the browser tab: the page first, so that tabs can be told apart. */
export function usePageTitle(title: string | null): void {
  useEffect(() => {
    if (title !== null) document.title = `${title} · Isoloom`;
  }, [title]);
}
