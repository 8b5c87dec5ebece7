import { parseAxisUnit } from '../columns/axis-unit.js';
import { fluxKindOfUnit } from '../columns/flux-unit.js';

/** A column heading taken apart. */
export interface Heading {
  /** as written, for people and for corrections */
  readonly name: string;
  /** '' when the heading has none */
  readonly unit: string;
  /** the header of the table says that it holds no numbers, whatever its cells look like */
  readonly notNumeric?: boolean;
}

/** Units that may follow a name without brackets: 'wave_nm', 'lambda/nm', 'wave_air_A', 'Wavelength, nm'. */
const SUFFIX = /[\s_,/]+(nm|um|µm|A|Å|AA|Ang|angstroms?|Angstroms?|microns?|micron|mu|cm-1|Hz|GHz|THz|eV|keV|m)$/;

/** Units in brackets or at the end of a heading: 'Wavelength (Angstrom)', 'wave [nm]', 'wave_nm'. */
export function parseHeading(text: string): Heading {
  const name = text.trim().slice(0, 200);
  const bracket = /[([]([^()[\]]*(?:\([^()]*\)[^()[\]]*)?)[)\]]\s*$/.exec(name);
  if (bracket) return { name, unit: unitIn(bracket[1]!) };
  const suffix = SUFFIX.exec(name);
  return { name, unit: suffix && parseAxisUnit(suffix[1]!) ? suffix[1]! : '' };
}

/** 'Angstrom, air' and 'nm (vacuum)' hold a unit and a remark. */
function unitIn(text: string): string {
  const plain = text.trim();
  if (parseAxisUnit(plain) || fluxKindOfUnit(plain)) return plain;
  return plain
    .split(/[,;]| in /)[0]!
    .replace(/\b(?:air|vac|vacuum)\b/gi, '')
    .trim();
}

/** Headings between blanks; a bracket belongs to the word before it: 'Flux [erg / s]' is one. */
export function splitHeadings(line: string): string[] {
  if (line.length > 10_000) return line.trim().split(/\s+/);
  return [...line.matchAll(/[^\s([]+(?:\s*[([][^)\]]*[)\]])?/g)].map((match) => match[0]);
}
