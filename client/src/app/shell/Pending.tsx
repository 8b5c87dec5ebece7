import { useDebouncedValue } from '@mantine/hooks';
import { useNavigation } from 'react-router-dom';
import classes from './shell.module.css';

/** A thread along the bar while the next page is on its way; not for waits too short to notice. */
export function Pending() {
  const loading = useNavigation().state !== 'idle';
  const [slow] = useDebouncedValue(loading, 150);
  return (
    <div role="status" className={classes.pending} data-shown={(loading && slow) || undefined}>
      {loading && slow && <span className={classes.unseen}>Loading the page</span>}
    </div>
  );
}
