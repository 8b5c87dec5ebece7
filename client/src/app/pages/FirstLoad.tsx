import { Brand } from '../shell/Brand.js';
import classes from './pages.module.css';

/** While the first page's code and data are on their way: the bar as it will stand, and a word for those who wait. */
export function FirstLoad() {
  return (
    <div className={classes.first}>
      <header className={classes.bar}>
        <Brand />
      </header>
      <p role="status" className={classes.slow}>
        Loading
      </p>
    </div>
  );
}
