const ROMAN = ['I', 'II', 'III', 'IV', 'V', 'VI', 'VII', 'VIII', 'IX', 'X', 'XI', 'XII', 'XIII', 'XIV', 'XV', 'XVI', 'XVII'] as const;

export interface Species {
  /** 'Na I', 'CH+', 'DIB' */
  readonly name: string;
  /** '' for molecules and bands */
  readonly element: string;
  /** 1 = neutral; 0 for molecules and bands */
  readonly stage: number;
  /** written in square brackets, '[O III]' */
  readonly forbidden: boolean;
}

/** The roman numeral of a stage of ionisation, 1 = I; '' beyond the table. */
export const romanStage = (stage: number): string => ROMAN[stage - 1] ?? '';

/**
 * Reads 'Na I', 'NaI', '[O III]', 'C III]', 'Fe 2', 'H' with a charge beside it, and molecules by their formula.
 * @param stage from a column of its own, where there is one
 * @returns null for text that names no species
 */
export function readSpecies(text: string, element = '', stage: number | null = null): Species | null {
  const forbidden = text.includes('[');
  const bare = text.replace(/[[\]]/g, '').trim();
  const atom = /^([A-Z][a-z]?)[\s_-]*([IVX]+|\d{1,2})$/.exec(bare);
  if (atom) {
    const numeral = /\d/.test(atom[2]!) ? Number(atom[2]) : ROMAN.indexOf(atom[2] as (typeof ROMAN)[number]) + 1;
    // 'CO2' and 'C2' are molecules: a digit that touches the symbol is no stage, unless a stage column says so
    const touching = /^[A-Z][a-z]?\d/.test(bare);
    if (numeral >= 1 && numeral <= ROMAN.length && !touching) return asAtom(atom[1]!, numeral, forbidden);
  }
  const symbol = element || (/^[A-Z][a-z]?$/.test(bare) ? bare : '');
  if (symbol && stage !== null && stage >= 1 && romanStage(stage)) return asAtom(symbol, stage, forbidden);
  if (!/^(?=.*[A-Za-z])[A-Za-z0-9+-]{1,16}$/.test(bare) || /^[A-Z][a-z]?$/.test(bare)) return null;
  return { name: bare, element: '', stage: 0, forbidden };
}

const asAtom = (element: string, stage: number, forbidden: boolean): Species => ({
  name: `${element} ${romanStage(stage)}`,
  element,
  stage,
  forbidden,
});
