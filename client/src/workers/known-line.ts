import { C_KM_PER_S, type Spectrum } from '@foreveil/shared';

/** A line that nearly every spectrum of its range shows, found near its place: the one check on air or vacuum a person can make. */
export interface KnownLineHint {
  readonly name: string;
  /** vacuum nm at rest */
  readonly restNm: number;
  /** velocity if the file's wavelengths are taken as they were read */
  readonly velocityKmPerS: number;
}

/** Vacuum wavelengths, nm. Source: NIST Atomic Spectra Database; [O III] from the same. From memory, to 0.001 nm. */
const KNOWN: readonly (readonly [name: string, restNm: number])[] = [
  ['Hα', 656.461],
  ['[O III]', 500.824],
  ['Hβ', 486.268],
  ['Na I', 589.158],
  ['Ca II', 393.477],
  ['Hγ', 434.169],
];

const REACH_KM_PER_S = 300;
/** Deviations, in units of the scatter around, that count as a line. */
const LEAST_DEVIATION = 8;

/** The most conspicuous of the known lines within 300 km/s of its place; null when none stands out. */
export function knownLineHint(spectrum: Pick<Spectrum, 'wavelength' | 'flux' | 'bad'>): KnownLineHint | null {
  let best: (KnownLineHint & { deviation: number }) | null = null;
  for (const [name, restNm] of KNOWN) {
    const found = conspicuous(spectrum, restNm);
    if (found && found.deviation > (best?.deviation ?? LEAST_DEVIATION)) {
      best = { name, restNm, velocityKmPerS: ((found.nm - restNm) / restNm) * C_KM_PER_S, deviation: found.deviation };
    }
  }
  return best && { name: best.name, restNm: best.restNm, velocityKmPerS: best.velocityKmPerS };
}

/** Centre of the strongest dip or peak near `restNm`, and how far it stands out of the scatter of the neighbourhood. */
function conspicuous({ wavelength, flux, bad }: Pick<Spectrum, 'wavelength' | 'flux' | 'bad'>, restNm: number) {
  const reach = (restNm * REACH_KM_PER_S) / C_KM_PER_S;
  const near: { nm: number; value: number }[] = [];
  for (let i = lowerBound(wavelength, restNm - 3 * reach); i < wavelength.length && wavelength[i]! <= restNm + 3 * reach; i++) {
    if (!bad[i] && Number.isFinite(flux[i])) near.push({ nm: wavelength[i]!, value: flux[i]! });
  }
  if (near.length < 15) return null;
  const level = median(near.map(({ value }) => value));
  const scatter = 1.4826 * median(near.map(({ value }) => Math.abs(value - level)));
  const inside = near.filter(({ nm }) => Math.abs(nm - restNm) <= reach);
  const top = inside.reduce((a, b) => (Math.abs(b.value - level) > Math.abs(a.value - level) ? b : a), inside[0] ?? near[0]!);
  const height = top.value - level;
  if (!inside.length || !(scatter > 0)) return null;
  const core = around(inside, inside.indexOf(top), ({ value }) => (value - level) / height > 0.5);
  const weight = core.reduce((sum, { value }) => sum + (value - level), 0);
  return { nm: core.reduce((sum, { nm, value }) => sum + nm * (value - level), 0) / weight, deviation: Math.abs(height) / scatter };
}

/** The unbroken run about a place in which `holds`; another line within reach, as the second of a doublet, is not part of it. */
function around<T>(list: readonly T[], place: number, holds: (item: T) => boolean): T[] {
  let [from, to] = [place, place];
  while (from > 0 && holds(list[from - 1]!)) from--;
  while (to + 1 < list.length && holds(list[to + 1]!)) to++;
  return list.slice(from, to + 1);
}

function lowerBound(sorted: Float64Array, value: number): number {
  let [from, to] = [0, sorted.length];
  while (from < to) {
    const middle = (from + to) >> 1;
    if (sorted[middle]! < value) from = middle + 1;
    else to = middle;
  }
  return from;
}

function median(values: number[]): number {
  values.sort((a, b) => a - b);
  return values[values.length >> 1] ?? NaN;
}
