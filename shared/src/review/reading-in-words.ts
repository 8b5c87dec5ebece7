/** What a feature is said to be; `species` null: unidentified. */
export interface NamedReading {
  readonly species: string | null;
  readonly restNm: number | null;
  readonly family: string | null;
}

/** A reading as the history keeps it: 'Na I 589.1583 nm, interstellar', rest wavelength in vacuum; 'unidentified'. */
export function readingInWords({ species, restNm, family }: NamedReading): string {
  if (species === null || restNm === null) return 'unidentified';
  return `${species} ${restNm.toFixed(4)} nm${family ? `, ${family}` : ''}`;
}
