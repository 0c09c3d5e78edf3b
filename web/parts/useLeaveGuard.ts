import { useEffect } from 'react';
import { guardLeaving } from '../routing/useRoute.ts';
import { COMMON } from '../texts/common.ts';

/** While `unsaved`, leaving the place or closing the window asks first. */
export function useLeaveGuard(unsaved: boolean): void {
  useEffect(() => {
    if (!unsaved) return;
    const release = guardLeaving(() => window.confirm(COMMON.leaveUnsaved));
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => {
      release();
      window.removeEventListener('beforeunload', ask);
    };
  }, [unsaved]);
}
