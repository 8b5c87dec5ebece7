import { analyse, DEFAULT_SETTINGS } from '@foreveil/shared';
import { matter, sceneOf, simulate, type Kind } from '../../../test/simulation/index.js';

/** Deviations over stated errors of whole simulated spectra without bent wavelengths. */
export interface StarDeviations {
  readonly temperature: number[];
  readonly systems: Record<string, number[]>;
}

/** The nearest system of a family counts as the one meant, within a resolution element. */
export function starDeviations(kinds: readonly Kind[], count: number, seed: number, tell: (line: string) => void): StarDeviations {
  const out: StarDeviations = { temperature: [], systems: {} };
  for (const kind of kinds) {
    for (let index = 0; index < count; index++) {
      const { spectrum, truth } = simulate(sceneOf({ kind, index, seed, trouble: 'plain' }));
      const { continuum, systems, resolvingPower } = analyse(spectrum, matter().list, DEFAULT_SETTINGS);
      if (continuum.constrained && truth.a_v < 0.05)
        out.temperature.push((continuum.temperatureK! - truth.temperature_K) / continuum.temperatureSigmaK!);
      for (const { family, velocity_km_s, vsini = 0 } of truth.systems) {
        const reach = 299_792.458 / resolvingPower + 0.3 * vsini;
        const off = systems
          .filter((s) => s.family === family)
          .map((s) => ({ by: s.velocityKmPerS - velocity_km_s, sigma: s.velocitySigmaKmPerS }))
          .sort((a, b) => Math.abs(a.by) - Math.abs(b.by))[0];
        if (off && Math.abs(off.by) < reach) (out.systems[family] ??= []).push(off.by / off.sigma);
      }
      tell(`${kind} ${index}`);
    }
  }
  return out;
}
