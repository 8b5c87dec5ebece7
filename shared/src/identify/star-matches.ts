import type { Line } from '../linelist/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { grow, type Scale } from './star-model.js';
import { dopplerFactor, velocityOf, type Coverage, type FeatureView } from './views.js';

/** A dip and the line that makes it. */
export interface Match {
  readonly feature: FeatureView;
  readonly line: Line;
  readonly index: number;
  readonly dv: number;
}

/** Dips where one photospheric line outweighs all others within the profile. */
export function aloneMatches(
  dips: readonly FeatureView[],
  lines: readonly Line[],
  index: Float64Array,
  velocity: number,
  coverage: Coverage,
  fwhmV = 0,
): Match[] {
  const factor = dopplerFactor(velocity);
  const out: Match[] = [];
  for (const f of dips) {
    if (fwhmV && (f.fwhmV < 0.6 * fwhmV || f.fwhmV > 1.7 * fwhmV)) continue;
    const half = (0.5 * Math.max(f.fwhmV, coverage.elementV) * f.wavelength) / C_KM_PER_S;
    let total = 0;
    let top = -1;
    let topValue = 0;
    for (
      let k = lineAt(lines, (f.wavelength - half) / factor);
      k < lines.length && lines[k]!.wavelengthNm * factor < f.wavelength + half;
      k++
    ) {
      const value = 10 ** index[k]!;
      if (!(value > 0)) continue;
      total += value;
      if (value > topValue) [top, topValue] = [k, value];
    }
    if (top < 0 || topValue < 0.75 * total || lines[top]!.element === 'H') continue;
    out.push({ feature: f, line: lines[top]!, index: index[top]!, dv: velocityOf(f.wavelength, lines[top]!.wavelengthNm) });
  }
  // the weakest predicted ones are chance more often than not: keep the strongest as many as make sense
  return out.sort((a, b) => b.index - a.index).slice(0, Math.max(12, Math.ceil(out.length * 0.6)));
}

export function lineAt(lines: readonly Line[], wavelength: number): number {
  let low = 0;
  let high = lines.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (lines[mid]!.wavelengthNm < wavelength) low = mid + 1;
    else high = mid;
  }
  return low;
}

/** Median velocity and width of the matches, clipped, with the error of the weighted mean. */
export function refine(matches: readonly Match[]): { velocity: number; sigma: number; fwhmV: number } {
  const median = (x: number[]): number => x.sort((a, b) => a - b)[x.length >> 1]!;
  let kept = [...matches];
  let velocity = median(kept.map((m) => m.dv));
  for (let pass = 0; pass < 3; pass++) {
    const scatter = 1.4826 * median(kept.map((m) => Math.abs(m.dv - velocity)));
    const near = matches.filter((m) => Math.abs(m.dv - velocity) < 2.5 * Math.max(scatter, 0.3));
    if (near.length < 3) break;
    kept = near;
    const weights = kept.map((m) => 1 / (m.feature.sigmaV ** 2 + (0.02 * m.feature.fwhmV) ** 2 + 0.04));
    velocity = kept.reduce((s, m, i) => s + weights[i]! * m.dv, 0) / weights.reduce((a, b) => a + b, 0);
  }
  const scatter = 1.4826 * median(kept.map((m) => Math.abs(m.dv - velocity)));
  return { velocity, sigma: Math.max(scatter / Math.sqrt(kept.length), 0.02), fwhmV: median(kept.map((m) => m.feature.fwhmV)) };
}

/** Shift and knee that fit the lone lines best in the sense of least absolute deviations. */
export function fitScale(matches: readonly Match[]): Scale {
  const x = matches.map((m) => m.index);
  const y = matches.map((m) => m.feature.logW - Math.log10(m.feature.wavelength));
  let best: Scale = { shift: 0, knee: -4.5 };
  let bestCost = Infinity;
  for (let knee = -6; knee <= -3; knee += 0.25) {
    for (let shift = -2; shift <= 9; shift += 0.05) {
      let cost = 0;
      for (let i = 0; i < x.length; i++) cost += Math.min(Math.abs(y[i]! - grow(x[i]!, { shift, knee })), 0.8);
      if (cost < bestCost) [best, bestCost] = [{ shift, knee }, cost];
    }
  }
  return best;
}
