import type { Family, Identification } from '@foreveil/shared';

/** A velocity at which agreed lines of a target lie, gathered over its spectra. */
export interface AgreedSystem {
  readonly key: string;
  /** null: features that were decided to be in no list */
  readonly family: Family | null;
  /** weighted mean over its lines; null when none has a velocity */
  readonly velocityKmPerS: number | null;
  readonly sigmaKmPerS: number | null;
  readonly lines: readonly Identification[];
  /** labels of the spectra it was seen in */
  readonly seenIn: readonly string[];
}

/** Systems of one family are one when they differ by less than this, or by less than three standard deviations. */
const SAME_KM_PER_S = 2;
const SAME_SIGMAS = 3;
/** A velocity measured better than this is still only as good as the rest wavelength. */
const LEAST_SIGMA_KM_PER_S = 0.05;

interface Moments {
  readonly velocity: number;
  readonly sigma: number;
}

function weightedMean(lines: readonly Identification[]): Moments | null {
  let weights = 0;
  let sum = 0;
  for (const { velocityKmPerS, velocitySigmaKmPerS } of lines) {
    if (velocityKmPerS === null) continue;
    const weight = 1 / Math.max(velocitySigmaKmPerS ?? 1, LEAST_SIGMA_KM_PER_S) ** 2;
    weights += weight;
    sum += weight * velocityKmPerS;
  }
  return weights ? { velocity: sum / weights, sigma: 1 / Math.sqrt(weights) } : null;
}

function isSame(a: Moments, b: Moments): boolean {
  const apart = Math.abs(a.velocity - b.velocity);
  return apart < SAME_KM_PER_S || apart < SAME_SIGMAS * Math.hypot(a.sigma, b.sigma);
}

interface Group {
  readonly family: Family | null;
  readonly lines: Identification[];
}

/** Lines of one system of one spectrum's analysis. */
function perSpectrum(lines: readonly Identification[]): Group[] {
  const groups = new Map<string, Group>();
  for (const line of lines) {
    const key = line.family === null ? 'none' : `${line.spectrumId} ${line.family} ${line.systemId}`;
    const group = groups.get(key);
    if (group) group.lines.push(line);
    else groups.set(key, { family: line.family as Family | null, lines: [line] });
  }
  return [...groups.values()];
}

/** The same gas seen in another spectrum joins; the Earth's air moves from night to night and stays apart by its velocity. */
function joined(groups: readonly Group[]): Group[] {
  const out: Group[] = [];
  for (const group of groups) {
    const mean = weightedMean(group.lines);
    const same = out.find((other) => {
      if (other.family !== group.family) return false;
      const otherMean = weightedMean(other.lines);
      return mean === null || otherMean === null ? mean === otherMean : isSame(mean, otherMean);
    });
    if (same) same.lines.push(...group.lines);
    else out.push({ family: group.family, lines: [...group.lines] });
  }
  return out;
}

const FAMILY_ORDER: readonly (Family | null)[] = ['stellar', 'interstellar', 'nebular', 'telluric', null];

/** Systems of the given lines: by family, then most lines first. */
export function agreedSystems(lines: readonly Identification[]): AgreedSystem[] {
  return joined(perSpectrum(lines))
    .map(({ family, lines: members }) => {
      const mean = weightedMean(members);
      return {
        key: `${family ?? 'none'}@${mean?.velocity.toFixed(1) ?? ''}`,
        family,
        velocityKmPerS: mean?.velocity ?? null,
        sigmaKmPerS: mean?.sigma ?? null,
        lines: members,
        seenIn: [...new Set(members.map(({ spectrumLabel }) => spectrumLabel))],
      };
    })
    .sort((a, b) => FAMILY_ORDER.indexOf(a.family) - FAMILY_ORDER.indexOf(b.family) || b.lines.length - a.lines.length);
}
