import { photosphericIndex } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import type { SystemModel } from './model.js';
import { HYDROGEN_DEPTH, HYDROGEN_KNEE, starModel, type Photosphere, type TemperatureHint } from './star-model.js';
import { dopplerFactor, velocityOf, type Coverage, type FeatureView } from './views.js';

const HYDROGEN_MEMBERS = 3;
const HYDROGEN_TEMPERATURE = 9500; // K, where hydrogen is strongest: assumed when the continuum does not tell

/**
 * A star by its hydrogen lines alone, as low resolution shows hot and A-type stars: at least three broad dips at one velocity, and most of
 * the first lines of the series that are covered.
 */
export function hydrogenStar(
  dips: readonly FeatureView[],
  lines: readonly Line[],
  coverage: Coverage,
  hint: TemperatureHint | null,
  rangeV: number,
  permits: (velocity: number) => boolean,
): SystemModel | null {
  const series = lines.filter(
    (l) => l.element === 'H' && l.wavelengthNm > coverage.fromNm && l.wavelengthNm < coverage.toNm && (l.oscillatorStrength ?? 0) > 0.01,
  );
  const seen = dips.map((d) => d.logW - Math.log10(d.wavelength)).sort((a, b) => b - a)[HYDROGEN_MEMBERS - 1] ?? 0;
  const first = series.filter((l) => (l.oscillatorStrength ?? 0) > 0.02 && wouldShow(l, seen, coverage));
  if (first.length < HYDROGEN_MEMBERS) return null;
  const step = 0.1 * coverage.elementV;
  let best: { velocity: number; members: FeatureView[]; score: number } | null = null;
  for (let velocity = -rangeV; velocity <= rangeV; velocity += step) {
    if (!permits(velocity)) continue;
    const factor = dopplerFactor(velocity);
    const members: FeatureView[] = [];
    let score = 0;
    for (const line of first) {
      const at = line.wavelengthNm * factor;
      const f = dips.find((d) => Math.abs(d.wavelength - at) < 0.3 * d.fwhmNm && d.fwhmV > 1.2 * coverage.elementV);
      if (!f || members.includes(f)) continue;
      members.push(f);
      score += Math.sqrt(f.significance) * (1 - (velocityOf(f.wavelength, at) / (0.3 * f.fwhmV)) ** 2);
    }
    if (!best || score > best.score) best = { velocity, members, score };
  }
  if (!best || best.members.length < HYDROGEN_MEMBERS || best.members.length < 0.6 * first.length) return null;
  const temperatureK = hint?.temperatureK ?? HYDROGEN_TEMPERATURE;
  const index = photosphericIndex(lines, temperatureK, 14);
  const strongest = lines.reduce((top, l, k) => (l.element === 'H' && index[k]! > top ? index[k]! : top), -Infinity);
  const measured = best.members.map((f) => f.logW - Math.log10(f.wavelength)).sort((a, b) => a - b);
  const top = measured[measured.length - 1]!;
  // lines of white dwarfs grow far beyond those of common stars before they saturate
  const knee = Math.max(HYDROGEN_KNEE, top - 0.6);
  const shift = knee + beyondKnee(top - knee) - strongest;
  const fwhmV = Math.min(...best.members.map((f) => f.fwhmV));
  const sigma = coverage.elementV * 0.2;
  const photosphere: Photosphere = { temperatureK, logNe: 14, velocity: best.velocity, index, height: 0, significance: best.score };
  return starModel(lines, photosphere, best.velocity, sigma, fwhmV, { shift, knee }, coverage);
}

/** Whether a line a third as strong, for its wavelength, as the strongest dips would be seen there. */
const wouldShow = (l: Line, strongest: number, coverage: Coverage): boolean => {
  const width = (l.wavelengthNm * 10 ** strongest) / 3;
  return width > coverage.threshold * coverage.sigmaW(l.wavelengthNm, width / HYDROGEN_DEPTH);
};

/** How far, in dex, the thin limit lies above the knee when the line itself does by `excess`: the inverse of `grow`. */
function beyondKnee(excess: number): number {
  let [low, high] = [excess - 1, excess * 4 + 4];
  for (let i = 0; i < 40; i++) {
    const mid = 0.5 * (low + high);
    if (mid - 0.75 * Math.log10(1 + 10 ** mid) < excess) low = mid;
    else high = mid;
  }
  return low;
}
