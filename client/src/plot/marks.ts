import type { Family, ReviewState } from '@foreveil/shared';

/** What a feature is read as; 'unidentified' beside the families of the line list. */
export type MarkFamily = Family | 'unidentified';

/** Outline of a family's sign around (x, y). Every shape keeps a different outline when hollow. */
export function markPath(family: MarkFamily, x: number, y: number, r: number): string {
  switch (family) {
    case 'stellar':
      return `M${x - r},${y}a${r},${r} 0 1,0 ${2 * r},0a${r},${r} 0 1,0 ${-2 * r},0z`;
    case 'interstellar': {
      const q = r * 1.22;
      return `M${x},${y - q}L${x + q},${y}L${x},${y + q}L${x - q},${y}z`;
    }
    case 'nebular': {
      const q = r * 1.15;
      return `M${x},${y - q}L${x + q},${y + q * 0.82}L${x - q},${y + q * 0.82}z`;
    }
    case 'telluric': {
      // the weather sign for haze
      const [q, b, o] = [r * 1.2, r * 0.56, r * 0.3];
      return `M${x - q},${y - o - b}h${2 * q}v${b}h${-2 * q}zM${x - q},${y + o}h${2 * q}v${b}h${-2 * q}z`;
    }
    case 'unidentified': {
      const q = r * 0.92;
      return `M${x - q},${y - q}h${2 * q}v${2 * q}h${-2 * q}z`;
    }
  }
}

/** The stroke that crosses out a rejected mark. */
export const crossPath = (x: number, y: number, r: number) => `M${x - r * 1.35},${y + r * 1.35}L${x + r * 1.35},${y - r * 1.35}`;

export const FAMILY_WORD: Record<MarkFamily, string> = {
  stellar: 'star',
  interstellar: 'cloud',
  nebular: 'nebula',
  telluric: 'air',
  unidentified: 'unidentified',
};

export const STATE_WORD: Record<ReviewState, string> = { proposed: 'proposed', accepted: 'accepted', rejected: 'rejected' };
