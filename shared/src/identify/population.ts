import { AT_LARGE, SETTLED, UNLISTED_SHARE, type Population } from './at-large.js';
import type { SystemModel } from './model.js';
import { widthRatio } from './offsets.js';
import type { FeatureRanking } from './rank.js';
import { median } from '../numeric/index.js';
import type { Coverage, FeatureView } from './views.js';

const PRIOR_FEATURES = 40; // features that the prior share is worth
const LEAST_SPREAD = 0.45; // dex

/** The population after a first look: strengths and widths as measured, systems as found, the share of unlisted lines as first ranked. */
export function populationOf(
  features: readonly FeatureView[],
  systems: readonly SystemModel[],
  rankings: readonly FeatureRanking[] | null,
  coverage: Coverage,
): Population {
  const kinds = { dip: features.filter((f) => f.kind === 'dip'), peak: features.filter((f) => f.kind === 'peak') };
  const middle = (list: readonly FeatureView[]): number =>
    list.length ? median(Float64Array.from(list, (f) => f.logW)) : AT_LARGE.logW('dip');
  const typical = { dip: middle(kinds.dip), peak: middle(kinds.peak) };
  const deviation = features.length ? 1.4826 * median(Float64Array.from(features, (f) => Math.abs(f.logW - typical[f.kind]))) : 0;
  const open = rankings ? rankings.reduce((sum, r) => sum + r.unidentified, 0) : 0;
  const members = membersOf(systems, rankings);
  const all = members.reduce((sum, m) => sum + m, 0);
  return {
    unlistedShare: rankings ? (open + UNLISTED_SHARE * PRIOR_FEATURES) / (features.length + PRIOR_FEATURES) : UNLISTED_SHARE,
    logW: (kind) => typical[kind],
    logWSpread: Math.max(deviation, LEAST_SPREAD),
    widthRatio: (f) => {
      let ratio = 0.1; // lines of no system found
      systems.forEach((s, k) => {
        if (s.kind !== f.kind || !members[k]) return;
        ratio += ((0.9 * members[k]!) / all) * widthRatio({ fwhmV: s.fwhmV }, f, coverage);
      });
      return all ? ratio : 1;
    },
    settled: SETTLED,
  };
}

/** Features that each system makes, as first ranked; one each before. */
function membersOf(systems: readonly SystemModel[], rankings: readonly FeatureRanking[] | null): number[] {
  if (!rankings) return systems.map(() => 1);
  return systems.map((s) => rankings.filter(({ ranked: [best] }) => best?.contender.system === s).length);
}
