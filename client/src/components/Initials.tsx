import classes from './components.module.css';

/** First letters of the first and the last name. */
export function initials(name: string): string {
  const words = name.trim().split(/\s+/).filter(Boolean);
  const letters = words.length > 1 ? [words[0], words.at(-1)] : words;
  return letters.map((word) => [...(word ?? '')][0]?.toUpperCase() ?? '').join('') || '?';
}

/** A person, small; their full name stands beside it or is its label. */
export const Initials = ({ name, self = false }: { name: string; self?: boolean }) => (
  <span className={classes.initials} data-self={self || undefined} aria-hidden="true">
    {initials(name)}
  </span>
);
