import type { FeatureView } from './views.js';

/** What the features of one spectrum are like as a whole: the ground that "not in the list" stands on. */
export interface Population {
  /** of all features, those made by lines that no list holds */
  readonly unlistedShare: number;
  /** typical log10 |W| in nm of features of a kind, and the spread, dex */
  logW(kind: 'dip' | 'peak'): number;
  readonly logWSpread: number;
  /** how much better the feature's width suits lines of the systems found than features at large */
  widthRatio(f: FeatureView): number;
  /** error of a centroid from profile misfit, as a share of the feature's FWHM */
  readonly settled: number;
}

export const UNLISTED_SHARE = 0.05; // prior: lists lack a few lines in a hundred
export const SETTLED = 0.012;

/** Before anything is known of a spectrum. */
export const AT_LARGE: Population = {
  unlistedShare: UNLISTED_SHARE,
  logW: () => -2.5,
  logWSpread: 0.8,
  widthRatio: () => 1,
  settled: SETTLED,
};
