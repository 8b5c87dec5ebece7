import type { Candidate, Feature, VelocitySystem } from './analysis.js';
import type { Identified } from './identify.js';
import type { Measured } from './measure.js';
import { velocityOf, type Coverage, type FeatureView } from './views.js';

export interface Told {
  readonly systems: VelocitySystem[];
  readonly features: Feature[];
  readonly cautions: string[];
}

/** Turns the inner result into what is stored and shown. */
export function describe(identified: Identified, measured: readonly Measured[], views: readonly FeatureView[], coverage: Coverage): Told {
  const features = measured.map((m, i): Feature => {
    const c = m.component;
    const ranking = identified.rankings[i]!;
    return {
      index: i,
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
      significance: m.significance,
      snr: m.snr,
      flags: m.flags,
      candidates: ranking.ranked.map((r): Candidate => {
        const e = r.contender.expected;
        const sigmaV = views[i]!.sigmaV;
        return {
          lineId: e.line.id,
          species: e.line.species,
          restNm: e.line.wavelengthNm,
          family: r.contender.system.family,
          systemId: r.contender.system.id,
          velocityKmPerS: velocityOf(c.centre, e.line.wavelengthNm),
          velocitySigmaKmPerS: sigmaV,
          probability: r.probability,
          share: r.share,
          expectedNm: 10 ** r.contender.logW,
          expectedSigmaNm: 10 ** r.contender.logW * r.contender.sigmaLog * Math.LN10,
          evidence: [],
          companions: [],
          sentence: '',
        };
      }),
      unidentifiedProbability: ranking.unidentified,
    };
  });
  const systems = identified.systems.map(({ system }): VelocitySystem => ({
    id: system.id,
    family: system.family,
    velocityKmPerS: system.velocity,
    velocitySigmaKmPerS: system.velocitySigma,
    significance: system.significance,
    members: features.filter((f) => f.candidates[0]?.systemId === system.id).length,
    fwhmKmPerS: Math.max(system.fwhmV, coverage.elementV),
  }));
  return { systems, features, cautions: [] };
}
