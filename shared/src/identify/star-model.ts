import { photosphericIndex } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import { C_KM_PER_S } from '../units/index.js';
import type { Expected, SpeciesModel, SystemModel } from './model.js';
import { dopplerFactor, scaleSigma, velocityOf, type Coverage } from './views.js';

/** What the continuum says of the temperature; null when nothing. */
export interface TemperatureHint {
  readonly temperatureK: number;
  readonly sigmaK: number;
}

const LINE_SCATTER = 0.22; // dex: log gf errors and abundance patterns
const HYDROGEN_SCATTER = 0.35;
export const HYDROGEN_DEPTH = 0.6; // area of a hydrogen line over its FWHM
const HYDROGEN_WIDTH_SPREAD = 0.7; // natural log
export const HYDROGEN_KNEE = -3.4; // log10 W/lambda at which hydrogen lines stop growing in proportion
const SPECIES_SIGMA = 0.35; // dex: ionisation, non-LTE, abundance

/** What a star is like for its lines: where its template stands out, and the strength index of every line there. */
export interface Photosphere {
  readonly temperatureK: number;
  readonly logNe: number;
  readonly velocity: number;
  readonly index: Float64Array;
  readonly height: number;
  readonly significance: number;
}

/** From strength index to equivalent width. */
export interface Scale {
  readonly shift: number;
  readonly knee: number;
}

/** log10(W/lambda) from the strength index: thin below the knee, a quarter of the slope far above it. */
export const grow = (index: number, s: Scale): number => index + s.shift - 0.75 * Math.log10(1 + 10 ** (index + s.shift - s.knee));

/** All lines of a star that might show. */
export function starModel(
  lines: readonly Line[],
  p: Photosphere,
  velocity: number,
  sigma: number,
  fwhmV: number,
  scale: Scale,
  coverage: Coverage,
): SystemModel {
  const factor = dopplerFactor(velocity);
  const bySpecies = new Map<string, Expected[]>();
  lines.forEach((line, k) => {
    if (!Number.isFinite(p.index[k]!)) return;
    const wavelength = line.wavelengthNm * factor;
    const hydrogen = line.element === 'H';
    const logW =
      grow(p.index[k]!, hydrogen ? { ...scale, knee: Math.max(scale.knee, HYDROGEN_KNEE) } : scale) + Math.log10(line.wavelengthNm);
    const limit = coverage.sigmaW(wavelength, (wavelength * fwhmV) / C_KM_PER_S);
    if (!(logW > Math.log10(limit) - 0.7)) return; // far below the noise even with a generous offset
    const e: Expected = {
      line,
      wavelength,
      logW,
      scatter: hydrogen ? HYDROGEN_SCATTER : LINE_SCATTER,
      sigmaV: Math.hypot(sigma, Math.max(0.3, scaleSigma(coverage))),
      // pressure makes hydrogen lines as wide as they are strong
      fwhmV: hydrogen ? Math.hypot(fwhmV, ((10 ** logW / wavelength) * C_KM_PER_S) / HYDROGEN_DEPTH) : fwhmV,
      ...(hydrogen && { widthSpread: HYDROGEN_WIDTH_SPREAD }),
    };
    const list = bySpecies.get(line.species);
    if (list) list.push(e);
    else bySpecies.set(line.species, [e]);
  });
  const hydrogen = bySpecies.get('H I');
  if (hydrogen) bySpecies.set('H I', withMergers(hydrogen));
  const species: SpeciesModel[] = [...bySpecies].map(([name, list]) => ({
    species: name,
    lines: list,
    priorMean: 0,
    priorSigma: name === 'H I' ? 0.8 : SPECIES_SIGMA,
    presence: 0.95,
  }));
  const strengthOf = (wanted: readonly Line[]): Float64Array =>
    photosphericIndex(wanted, p.temperatureK, p.logNe).map((x, k) => grow(x, scale) + Math.log10(wanted[k]!.wavelengthNm));
  return {
    id: 'star',
    family: 'stellar',
    kind: 'dip',
    velocity,
    velocitySigma: sigma,
    significance: p.significance,
    fwhmV,
    species,
    strengthOf,
  };
}

/** High members of a series stand closer than they are wide: they form the series' edge, not lines (Inglis & Teller 1939, ApJ 90, 439). */
const withMergers = (series: readonly Expected[]): Expected[] =>
  series.map((e, k) => {
    const near = [series[k - 1], series[k + 1]].some(
      (n) => n && Math.abs(velocityOf(n.wavelength, e.wavelength)) < 0.8 * Math.max(e.fwhmV, n.fwhmV),
    );
    return near ? { ...e, merges: true } : e;
  });
