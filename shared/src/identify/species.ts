import type { SpeciesPresence } from './analysis.js';
import { PLACE, signed } from './evidence.js';
import type { Identified } from './identify.js';
import { offsetMoments, type SpeciesState } from './offsets.js';
import type { SystemState } from './rank.js';

const WORTH_SAYING = 0.01;

/** What each species of each system comes to: all its lines together, and the features that it makes. */
export function speciesOf({ systems, rankings }: Identified): SpeciesPresence[] {
  const claims = new Map<SpeciesState, { none: number; first: number }>();
  for (const { ranked, unidentified } of rankings) {
    ranked.forEach((r, k) => {
      const claim = claims.get(r.contender.state) ?? { none: 1, first: 0 };
      claim.none *= 1 - r.probability;
      if (k === 0 && r.probability > unidentified) claim.first++;
      claims.set(r.contender.state, claim);
    });
  }
  return systems.flatMap((s) =>
    s.states
      .map((state) => presenceOf(s, state, claims.get(state) ?? { none: 1, first: 0 }))
      .filter((p) => p.seen + p.missing > 0 && (p.probability >= WORTH_SAYING || p.missing > 0))
      .sort((a, b) => b.probability - a.probability || b.features - a.features || (a.species < b.species ? -1 : 1)),
  );
}

function presenceOf({ system }: SystemState, state: SpeciesState, claim: { none: number; first: number }): SpeciesPresence {
  const { mean, sigma, logEvidence } = offsetMoments(state, null);
  const prior = state.model.presence;
  const odds = (prior / (1 - prior)) * Math.exp(Math.max(-30, Math.min(30, logEvidence)));
  const count = (...outcomes: string[]) => state.terms.filter((t) => outcomes.includes(t.outcome)).length;
  const probability = Math.min(odds / (1 + odds), 1 - claim.none);
  const [seen, missing, belowLimit] = [count('seen', 'merged'), count('missing'), count('below_limit')];
  return {
    systemId: system.id,
    family: system.family,
    species: state.model.species,
    probability,
    seen,
    missing,
    belowLimit,
    features: claim.first,
    offsetDex: mean,
    offsetSigmaDex: sigma,
    sentence: sentenceOf(
      `${state.model.species} in ${PLACE[system.family]} at ${signed(system.velocity, 1)} km/s`,
      probability,
      seen,
      missing,
      mean,
      sigma,
    ),
  };
}

function sentenceOf(subject: string, p: number, seen: number, missing: number, mean: number, sigma: number): string {
  const verdict =
    p > 0.99
      ? 'is present'
      : p > 0.9
        ? 'is very likely present'
        : p > 0.5
          ? 'is likely present'
          : p > 0.1
            ? 'may be present'
            : 'does not show';
  const lines = `${seen} of the ${seen + missing} ${seen + missing === 1 ? 'line' : 'lines'} due ${seen === 1 ? 'is' : 'are'} seen`;
  const factor = 10 ** mean;
  const strength =
    seen && p > 0.5
      ? `; they are ${(factor >= 1 ? factor : 1 / factor).toFixed(1)} times ${factor >= 1 ? 'stronger' : 'weaker'} than the strength model has them, within a factor ${(10 ** sigma).toFixed(1)}`
      : '';
  return `${subject} ${verdict} (${(100 * p).toFixed(p > 0.99 || p < 0.01 ? 1 : 0)} %): ${lines}${strength}.`;
}
