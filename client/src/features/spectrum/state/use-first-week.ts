import { useLocalStorage } from '@mantine/hooks';
import { useEffect } from 'react';

const WEEK_MS = 7 * 86_400_000;

/** Whether this browser first saw a curve less than a week ago: the legend is in the picture then, later it is one press away. */
export function useFirstWeek(now: number): boolean {
  const [since, setSince] = useLocalStorage<number | null>({
    key: 'foreveil-first-curve',
    defaultValue: null,
    getInitialValueInEffect: false,
  });
  useEffect(() => {
    if (since === null) setSince(now);
  }, [since, setSince, now]);
  return since === null || now - since < WEEK_MS;
}
