import { photosphericIndex } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { correlate, peaksOf, type VelocityGrid } from './correlate.js';
import type { SystemModel } from './model.js';
import { isPermitted, refinedVelocity, weigh, type Scene } from './search.js';
import { hydrogenStar } from './star-hydrogen.js';
import { aloneMatches, fitScale, refine } from './star-matches.js';
import { starModel, type Photosphere, type TemperatureHint } from './star-model.js';
import type { Coverage, FeatureView } from './views.js';

export type { TemperatureHint } from './star-model.js';

const TEMPERATURES = [3600, 4200, 4700, 5200, 5700, 6300, 7000, 7800, 8700, 9800, 11000, 12500, 14500, 17000, 20000, 23500, 27500, 32000];
const ELECTRONS = [13, 14]; // log10 n_e, cm^-3, of cool and hot photospheres
const DEPTHS = [0.25, 0.7, 1.6]; // lines in the template as a multiple of the number of dips: how far down the strength scale the data reach
const SIGNIFICANT = 3.5; // of the correlation peak, in robust scatters of the score: broad lines make broad peaks; the evidence decides
const OTHERS = 0.6; // dips that other systems explain so well do not speak for a star
const NOBODY = { id: '' } as SystemModel;
const MEMBERS = 5; // dips that the template must explain
const ENOUGH = 12; // ln evidence: among few dips some template fits by chance

/**
 * The star: temperature, electron density and velocity whose predicted line strengths correlate best with the dips, then the strength
 * scale and saturation from lines that stand alone.
 * @param lines photospheric lines within reach of the spectrum, ascending
 * @returns null when no velocity stands out
 */
export function findStar(scene: Scene, lines: readonly Line[], hint: TemperatureHint | null, rangeV: number): SystemModel | null {
  const { features, coverage } = scene;
  const dips = features.filter(
    (f) => f.kind === 'dip' && !f.flags.includes('cosmic') && scene.background.explained(f.index, NOBODY) < OTHERS,
  );
  if (dips.length < MEMBERS || lines.length === 0) return null;
  const permits = (velocity: number) => isPermitted(scene, velocity);
  const best = bestPhotosphere(dips, lines, coverage, hint, rangeV, permits);
  if (!best || best.significance < SIGNIFICANT) return hydrogenStar(dips, lines, coverage, hint, rangeV, permits);
  const alone = aloneMatches(dips, lines, best.index, best.velocity, coverage);
  if (alone.length < MEMBERS) return hydrogenStar(dips, lines, coverage, hint, rangeV, permits);
  const { velocity, sigma, fwhmV } = refine(alone);
  const scale = fitScale(aloneMatches(dips, lines, best.index, velocity, coverage, fwhmV));
  let star = starModel(lines, best, velocity, sigma, fwhmV, scale, coverage);
  for (let pass = 0; pass < 2; pass++) {
    const moved = refinedVelocity(weigh(star, scene));
    if (moved.members < MEMBERS) break;
    star = starModel(lines, best, moved.velocity, moved.sigma, fwhmV, scale, coverage);
  }
  const stands = permits(star.velocity) && weigh(star, scene).evidence > ENOUGH;
  return stands ? star : hydrogenStar(dips, lines, coverage, hint, rangeV, permits);
}

const COMPANION_DIPS = 15; // unexplained dips worth a second search
const COMPANION_SHARE = 0.12; // of all dips
const COMPANION_ENOUGH = 30; // ln evidence: lines that no list holds must not make a star

/** A second star in the spectrum, from the dips that everything found so far leaves unexplained; at a velocity of its own. */
export function findCompanion(
  scene: Scene,
  star: SystemModel,
  lines: readonly Line[],
  hint: TemperatureHint | null,
  rangeV: number,
): SystemModel | null {
  const dips = scene.features.filter((f) => f.kind === 'dip');
  const open = dips.filter((f) => scene.background.explained(f.index, NOBODY) < OTHERS).length;
  if (open < COMPANION_DIPS || open < COMPANION_SHARE * dips.length) return null;
  const apart = Math.max(0.8 * star.fwhmV, scene.coverage.elementV);
  const permits = (v: number) => isPermitted(scene, v) && Math.abs(v - star.velocity) > apart;
  const found = findStar({ ...scene, permits }, lines, hint, rangeV);
  if (!found || weigh(found, scene).evidence < COMPANION_ENOUGH) return null;
  return { ...found, id: 'companion' };
}

function bestPhotosphere(
  dips: readonly FeatureView[],
  lines: readonly Line[],
  coverage: Coverage,
  hint: TemperatureHint | null,
  rangeV: number,
  permits: (velocity: number) => boolean,
): Photosphere | null {
  const weight = Float64Array.from(dips, (f) => Math.sqrt(Math.min((10 ** f.logW / f.wavelength) * C_KM_PER_S, 40)));
  const spread = Float64Array.from(dips, (f) => Math.hypot(f.sigmaV, 0.12 * f.fwhmV));
  const typical = Float64Array.from(spread).sort()[spread.length >> 1]!;
  const step = Math.max(0.25 * coverage.elementV, Math.min(0.4 * typical, 6));
  const grid: VelocityGrid = { from: -rangeV, step, count: 2 * Math.ceil(rangeV / step) + 1 };
  const wavelength = Float64Array.from(lines, (l) => l.wavelengthNm);
  const near = hint ? [hint.temperatureK] : TEMPERATURES;
  let best: Photosphere | null = null;
  for (const temperatureK of near) {
    for (const logNe of ELECTRONS) {
      const index = photosphericIndex(lines, temperatureK, logNe);
      const sorted = Float64Array.from(index.filter((x) => Number.isFinite(x)))
        .sort()
        .reverse();
      for (const depth of DEPTHS) {
        const cut = sorted[Math.min(sorted.length - 1, Math.round(depth * dips.length))]!;
        const template = {
          wavelength,
          weight: Float64Array.from(index, (x) => (x > cut - 0.3 ? 10 ** (0.5 * Math.min(x - cut, 1.2)) : 0)),
        };
        const score = correlate(dips, weight, spread, template, grid);
        const peak = peaksOf(score, grid, 5, 40).find((p) => permits(p.velocity));
        if (peak && (!best || peak.height > best.height))
          best = { temperatureK, logNe, velocity: peak.velocity, index, height: peak.height, significance: peak.significance };
      }
    }
  }
  return best;
}

const ASSUMED_TEMPERATURE = 5800; // K, where neither continuum nor person tells
const ASSUMED_SCALE = { strongest: -4, knee: -4.5 } as const; // log10 W/lambda of common lines, when no line stands alone to measure it by

/** A star at a velocity that is known from elsewhere, whether or not its lines stand out. */
export function assumedStar(
  scene: Scene,
  lines: readonly Line[],
  hint: TemperatureHint | null,
  velocity: number,
  sigma: number,
): SystemModel {
  const { coverage } = scene;
  const dips = scene.features.filter((f) => f.kind === 'dip' && !f.flags.includes('cosmic'));
  const temperatureK = hint?.temperatureK ?? ASSUMED_TEMPERATURE;
  const index = photosphericIndex(lines, temperatureK, 14);
  const alone = aloneMatches(dips, lines, index, velocity, coverage).filter((m) => Math.abs(m.dv - velocity) < m.feature.fwhmV + 3 * sigma);
  const strongest = index.reduce((top, x) => (Number.isFinite(x) && x > top ? x : top), -Infinity);
  const scale = alone.length < 3 ? { shift: ASSUMED_SCALE.strongest - strongest, knee: ASSUMED_SCALE.knee } : fitScale(alone);
  const widths = alone.map((m) => m.feature.fwhmV).sort((a, b) => a - b);
  const fwhmV = widths[widths.length >> 1] ?? 1.5 * coverage.elementV;
  const photosphere: Photosphere = { temperatureK, logNe: 14, velocity, index, height: 0, significance: 0 };
  return starModel(lines, photosphere, velocity, sigma, fwhmV, scale, coverage);
}
