import type { ReviewState } from '../review/index.js';
import type { Iso } from './api.js';

export const SEARCH_ORDERS = ['wavelength', 'velocity', 'width'] as const;
export type SearchOrder = (typeof SEARCH_ORDERS)[number];

/** What to look for among the identifications of all programmes one may read; all parts may be left out. */
export interface IdentificationQuery {
  /** as in 'Na I'; 'unidentified' for what was decided to be in no list */
  species?: string;
  family?: string;
  /** 'accepted' when left out */
  state?: ReviewState;
  programmeId?: string;
  /** where it was measured, vacuum nm */
  fromNm?: number;
  toNm?: number;
  fromKmPerS?: number;
  toKmPerS?: number;
  /** equivalent width, nm, positive in absorption */
  fromWidthNm?: number;
  toWidthNm?: number;
  /** the same target has, or has not, an accepted line of this species within `companionKmPerS` of the same velocity */
  withSpecies?: string;
  withoutSpecies?: string;
  /** 5 km/s when left out */
  companionKmPerS?: number;
  /** 'wavelength' when left out */
  order?: SearchOrder;
}

export interface FoundIdentification {
  id: string;
  programmeId: string;
  programmeName: string;
  simulated: boolean;
  targetId: string;
  targetName: string;
  spectrumId: string;
  spectrumLabel: string;
  featureIndex: number | null;
  kind: 'dip' | 'peak';
  wavelengthNm: number;
  wavelengthSigmaNm: number;
  equivalentWidthNm: number;
  equivalentWidthSigmaNm: number;
  species: string | null;
  restNm: number | null;
  family: string | null;
  velocityKmPerS: number | null;
  velocitySigmaKmPerS: number | null;
  probability: number;
  state: ReviewState;
  lineSource: string | null;
  decidedBy: string;
  decidedAt: Iso;
}

/** A search that a person keeps. */
export interface SavedSearch {
  id: string;
  name: string;
  query: IdentificationQuery;
  createdAt: Iso;
}
export type NewSavedSearch = Pick<SavedSearch, 'name' | 'query'>;
