import type { Analysis } from './analysis.js';

const KNOWN_BLENDS = [
  { name: 'Na I D', from: 588.6, to: 590.2, species: 'Na I' },
  { name: 'K I 769.9', from: 769.4, to: 770.6, species: 'K I' },
];

/** What a person should read before trusting the numbers; complete sentences. */
export function cautionsOf(a: Omit<Analysis, 'cautions'>): string[] {
  const out: string[] = [];
  if (!a.continuum.constrained && a.continuum.statement) out.push(a.continuum.statement);
  if (a.frame === 'unknown')
    out.push('The velocity frame is unknown: velocities may be off by up to 30 km/s, and air lines are looked for over that range.');
  if (a.resolvingPowerHow === 'estimated')
    out.push(
      `The resolving power is not stated; ${Math.round(a.resolvingPower)} was estimated from the narrowest features or the sampling.`,
    );
  if (a.noiseHow === 'estimated') out.push('The file gives no errors; they were estimated from the scatter.');
  if (a.noiseHow === 'stated_rescaled') out.push('The stated errors do not agree with the scatter and were rescaled.');
  if (a.systems.some((s) => s.family === 'telluric')) {
    for (const b of KNOWN_BLENDS) {
      const near = a.features.filter((f) => f.wavelengthNm > b.from && f.wavelengthNm < b.to);
      const touched = near.filter(
        (f) => f.candidates[0]?.species === b.species && f.candidates.some((c) => c.family === 'telluric' && c.share > 0.05),
      );
      if (touched.length)
        out.push(
          `Water or oxygen of the Earth's air takes part in ${touched.length} feature${touched.length > 1 ? 's' : ''} at ${b.name}: widths and columns there are upper limits.`,
        );
    }
  }
  const saturated = a.features.filter((f) => f.flags.includes('saturated')).length;
  if (saturated)
    out.push(`${saturated} feature${saturated > 1 ? 's are' : ' is'} saturated: the equivalent width says little about the column.`);
  const open = a.features.filter((f) => f.unidentifiedProbability > (f.candidates[0]?.probability ?? 0)).length;
  if (open) out.push(`${open} of ${a.features.length} features have no reading in the line list that is better than "unidentified".`);
  return out;
}
