import { modals } from '@mantine/modals';
import { useEffect } from 'react';
import { useBlocker } from 'react-router-dom';
import { counted } from '../../lib/number.js';
import { isUnfinished, type Entry } from './entry.js';

/** Asks before leaving the page loses files that were read or are on their way. */
export function useLeaveGuard(entries: readonly Entry[]) {
  const unfinished = entries.filter(isUnfinished).length;
  const blocker = useBlocker(({ currentLocation, nextLocation }) => unfinished > 0 && currentLocation.pathname !== nextLocation.pathname);

  useEffect(() => {
    if (blocker.state !== 'blocked') return;
    modals.openConfirmModal({
      title: 'Leave these files?',
      children: (
        <p>
          {counted(unfinished, 'file')} on this page {unfinished === 1 ? 'is' : 'are'} not added yet. What is on its way is cancelled.
        </p>
      ),
      labels: { confirm: 'Leave', cancel: 'Stay' },
      confirmProps: { variant: 'filled' },
      onConfirm: () => blocker.proceed(),
      onCancel: () => blocker.reset(),
    });
  }, [blocker, unfinished]);

  useEffect(() => {
    if (!unfinished) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [unfinished]);
}
