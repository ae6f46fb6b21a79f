import { useEffect } from 'react';

/** What the browser's tab says: the sheet first, since tabs are cut short. */
export function useTitle(...parts: (string | undefined)[]): void {
  const title = [...parts, 'Elbowroom'].filter(Boolean).join(' · ');
  useEffect(() => {
    document.title = title;
  }, [title]);
}
