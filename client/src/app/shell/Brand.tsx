import { Link } from 'react-router-dom';
import { pagePaths } from '../../lib/paths.js';
import classes from './shell.module.css';

/** Four threads gathered by one ring. */
export const Glyph = ({ size = 20 }: { size?: number }) => (
  <svg
    width={size}
    height={size}
    viewBox="0 0 20 20"
    aria-hidden="true"
    fill="none"
    stroke="currentColor"
    strokeWidth="1.35"
    strokeLinecap="round"
  >
    <path d="M2 1.5C2 8 8.6 7.5 8.6 10S2 12 2 18.5M7.3 1.5C7.3 6.5 9.5 7.5 9.5 10S7.3 13.5 7.3 18.5M12.7 1.5C12.7 6.5 10.5 7.5 10.5 10S12.7 13.5 12.7 18.5M18 1.5C18 8 11.4 7.5 11.4 10S18 12 18 18.5" />
  </svg>
);

export function Brand() {
  return (
    <Link to={pagePaths.programmes} className={classes.brand} aria-label="Foreveil, your programmes">
      <Glyph />
      <span className={classes.word}>Foreveil</span>
    </Link>
  );
}
