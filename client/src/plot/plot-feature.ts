import type { Feature, ReviewState } from '@foreveil/shared';
import type { MarkFamily } from './marks.js';

/** A feature as the panels draw it. */
export interface PlotFeature extends Pick<
  Feature,
  'index' | 'kind' | 'wavelengthNm' | 'fwhmNm' | 'depth' | 'equivalentWidthNm' | 'damped'
> {
  readonly family: MarkFamily;
  readonly state: ReviewState;
  /** the staff it sits on */
  readonly staveId: string;
  /** 'Na I 589.158' */
  readonly label: string;
  /** greater: its label is kept where labels collide */
  readonly priority: number;
}

/** A velocity system as a staff. */
export interface Stave {
  readonly id: string;
  readonly family: MarkFamily;
  readonly word: string;
  /** null for the staff of the unidentified */
  readonly velocityKmPerS: number | null;
}

/** A line that should show and does not, drawn dashed on its staff while its sister is selected. */
export interface DueLine {
  readonly staveId: string;
  readonly nm: number;
  readonly label: string;
}
