import type { LineList } from '../linelist/index.js';
import type { Candidate, Feature, SpeciesPresence, VelocitySystem } from './analysis.js';
import { argue, companionsOf, sumUp } from './evidence.js';
import type { Identified } from './identify.js';
import type { Measured } from './measure.js';
import type { FeatureRanking, Ranked } from './rank.js';
import { Elsewhere, settlingOf } from './settle.js';
import { speciesOf } from './species.js';
import { dopplerFactor, velocityOf, type Coverage, type FeatureView } from './views.js';

export interface Told {
  readonly systems: VelocitySystem[];
  readonly features: Feature[];
  readonly species: SpeciesPresence[];
}

const FAST = 1500; // km/s
const ARGUED = 4; // candidates that get their companions and what would settle them; the argument is given for all

/** Turns the inner result into what is stored and shown. */
export function describe(
  identified: Identified,
  measured: readonly Measured[],
  views: readonly FeatureView[],
  coverage: Coverage,
  list: LineList,
): Told {
  const elsewhere = new Elsewhere(list.lines, coverage);
  const features = measured.map((m, i) => featureOf(m, views[i]!, identified.rankings[i]!, coverage, elsewhere));
  const systems = identified.systems
    .map(({ system }): VelocitySystem => ({
      id: system.id,
      family: system.family,
      velocityKmPerS: system.velocity,
      velocitySigmaKmPerS: system.velocitySigma,
      significance: system.significance,
      members: features.filter((f) => f.candidates[0]?.systemId === system.id && f.candidates[0].probability > f.unidentifiedProbability)
        .length,
      fwhmKmPerS: Math.max(system.fwhmV, coverage.elementV),
      ...(Math.abs(system.velocity) > FAST && { redshift: dopplerFactor(system.velocity) - 1 }),
      ...(system.set && { set: true }),
    }))
    .filter((s) => s.members > 0 || s.set);
  const shown = new Set(systems.map((s) => s.id));
  return { systems, features, species: speciesOf(identified).filter((s) => shown.has(s.systemId)) };
}

function featureOf(m: Measured, view: FeatureView, ranking: FeatureRanking, coverage: Coverage, elsewhere: Elsewhere): Feature {
  const c = m.component;
  return {
    index: view.index,
    kind: c.kind,
    wavelengthNm: c.centre,
    wavelengthSigmaNm: c.sigmaCentre,
    equivalentWidthNm: m.equivalentWidthNm,
    equivalentWidthSigmaNm: m.equivalentWidthSigmaNm,
    directEquivalentWidthNm: m.directNm,
    directEquivalentWidthSigmaNm: m.directSigmaNm,
    fwhmNm: c.fwhm,
    fwhmSigmaNm: c.fwhm * c.sigmaLogFwhm,
    depth: c.kind === 'dip' ? c.amplitude : -c.amplitude,
    depthSigma: c.sigmaAmplitude,
    shape: c.damped ? 'voigt' : c.core.name === 'rotation' ? 'rotation' : 'gaussian',
    ...(c.damped && { damped: { ...c.damped, dopplerNm: c.scale } }),
    significance: m.significance,
    snr: m.snr,
    flags: m.flags,
    candidates: ranking.ranked.map((r, k) => candidateOf(r, k < ARGUED, view, ranking, coverage, elsewhere)),
    unidentifiedProbability: ranking.unidentified,
  };
}

function candidateOf(
  r: Ranked,
  full: boolean,
  view: FeatureView,
  ranking: FeatureRanking,
  coverage: Coverage,
  elsewhere: Elsewhere,
): Candidate {
  const c = r.contender;
  const { line } = c.expected;
  const evidence = argue(r, view, ranking.contenders, ranking.unidentified, coverage);
  const beyond = full ? elsewhere.of(c) : [];
  const companions = full ? companionsOf(c, view, beyond) : [];
  const settle = full ? settlingOf(r, view, beyond, coverage) : null;
  return {
    lineId: line.id,
    species: line.species,
    restNm: line.wavelengthNm,
    family: c.system.family,
    systemId: c.system.id,
    velocityKmPerS: velocityOf(view.wavelength, line.wavelengthNm),
    velocitySigmaKmPerS: view.sigmaV,
    probability: r.probability,
    share: r.share,
    expectedNm: 10 ** c.logW,
    expectedSigmaNm: 10 ** c.logW * c.sigmaLog * Math.LN10,
    evidence,
    companions,
    sentence: sumUp(c, evidence, settle),
    settle,
  };
}
