import type { NewTarget, TargetKind } from '@foreveil/shared';
import { declination, parseCoordinate, rightAscension } from '../lib/position.js';

/** The facts of a target as they are typed. */
export interface TargetForm {
  name: string;
  kind: TargetKind;
  ra: string;
  dec: string;
  notes: string;
}

export const emptyTarget: TargetForm = { name: '', kind: 'star', ra: '', dec: '', notes: '' };

type TargetFacts = Required<NewTarget>;

export const toForm = ({ name, kind, raDeg, decDeg, notes }: TargetFacts): TargetForm => ({
  name,
  kind,
  ra: raDeg === null ? '' : rightAscension(raDeg),
  dec: decDeg === null ? '' : declination(decDeg),
  notes,
});

const rightAscensionOf = (text: string): number | null => parseCoordinate(text, 'hours');
const declinationOf = (text: string): number | null => parseCoordinate(text, 'degrees');

/** Sentences for what cannot be saved, by field; null where all is well. */
export const targetRules = {
  name: (text: string) => (text.trim() ? null : 'A target needs a name.'),
  ra: (text: string) => {
    if (!text.trim()) return null;
    const deg = rightAscensionOf(text);
    return deg !== null && deg >= 0 && deg < 360 ? null : 'Write hours as 21 14 07.31, or degrees from 0 to 360 as 318.5305.';
  },
  dec: (text: string) => {
    if (!text.trim()) return null;
    const deg = declinationOf(text);
    return deg !== null && Math.abs(deg) <= 90 ? null : 'Write degrees as +48 12 51.6, or from −90 to 90 as 48.2143.';
  },
};

/**
 * What was typed, as the server takes it.
 * @param seen the facts that the form was filled with: a coordinate left as it was shown keeps all its digits
 */
export function fromForm({ name, kind, ra, dec, notes }: TargetForm, seen?: TargetFacts): TargetFacts {
  const shown = seen && toForm(seen);
  return {
    name: name.trim(),
    kind,
    raDeg: shown && ra === shown.ra ? seen.raDeg : ra.trim() ? rightAscensionOf(ra) : null,
    decDeg: shown && dec === shown.dec ? seen.decDeg : dec.trim() ? declinationOf(dec) : null,
    notes: notes.trim(),
  };
}
