const SUBSCRIPTS = '₀₁₂₃₄₅₆₇₈₉';

/** As chemists write it: H₂O, CH⁺; ions in Roman numerals stay as they are. */
export const speciesName = (species: string): string =>
  /\s/.test(species) ? species : species.replace(/(?<=[A-Za-z])\d/g, (digit) => SUBSCRIPTS[Number(digit)] ?? digit).replace(/\+$/, '⁺');
