import type { Spectrum } from '@foreveil/shared';
import type { Chance } from './chance.js';
import { placeOf, type Grid } from './grid.js';

/** How light becomes a file. */
export interface Instrument {
  readonly fromNm: number;
  readonly toNm: number;
  readonly resolvingPower: number;
  readonly samplesPerElement: number;
  /** per sample, where the continuum is at its middle */
  readonly signalToNoise: number;
  /** third Gauss-Hermite moment of the profile */
  readonly skew: number;
  /** part of a resolution element by which wavelengths are bent at most */
  readonly bend: number;
  /** smoothing of the noise over neighbours: 0 none, 0.5 as much as a resampled spectrum commonly has */
  readonly noiseSmoothing: number;
  readonly cosmicHits: number;
  readonly gaps: number;
  /** whether the file gives its errors */
  readonly statesSigma: boolean;
  /** smooth factors on the flux, parts of one */
  readonly ripple: number;
}

export interface Observed {
  readonly spectrum: Spectrum;
  /** where a line at a true wavelength stands in the file */
  readonly shown: (nm: number) => number;
  /** 1 sigma over the continuum at a wavelength, and samples per nm there */
  readonly noiseAt: (nm: number) => { readonly relative: number; readonly perNm: number };
  readonly covered: (nm: number, halfWidthNm: number) => boolean;
}

/** Bends the wavelength scale by a slow wave, so that lines stand up to `bend` of an element from where they belong. */
function bending(instrument: Instrument, chance: Chance): (nm: number) => number {
  const phase = chance.between(0, 2 * Math.PI);
  const waves = chance.between(0.5, 2);
  const size = instrument.bend / instrument.resolvingPower;
  return (nm) =>
    nm * (1 + size * Math.sin(phase + (2 * Math.PI * waves * (nm - instrument.fromNm)) / (instrument.toNm - instrument.fromNm)));
}

/** @param light and @param continuum on the grid, both already seen through the instrument profile */
export function observe(grid: Grid, light: Float64Array, continuum: Float64Array, instrument: Instrument, chance: Chance): Observed {
  const { fromNm, toNm, resolvingPower, signalToNoise } = instrument;
  const shown = bending(instrument, chance);
  const step = 1 / (resolvingPower * instrument.samplesPerElement);
  const n = Math.floor(Math.log(toNm / fromNm) / step);
  const wavelength = new Float64Array(n).map((_, i) => fromNm * Math.exp((i + 0.5) * step));
  const sampled = (values: Float64Array, nm: number) => {
    const at = Math.min(grid.size - 2, Math.max(0, placeOf(grid, nm)));
    const i = Math.floor(at);
    return values[i]! + (at - i) * (values[i + 1]! - values[i]!);
  };
  // a slow bend is undone well enough by taking it off once
  const source = wavelength.map((nm) => nm - (shown(nm) - nm));
  const response = rippling(instrument, chance);
  const flux = source.map((nm, i) => sampled(light, nm) * response((2 * i) / (n - 1) - 1));
  const level = source.map((nm, i) => sampled(continuum, nm) * response((2 * i) / (n - 1) - 1));
  const middle = Float64Array.from(level).sort()[n >> 1]!;
  const sigma = flux.map((f) => (middle / signalToNoise) * Math.sqrt(Math.max(0.03, 0.1 + (0.9 * f) / middle)));
  const noise = smoothNoise(n, instrument.noiseSmoothing, chance);
  for (let i = 0; i < n; i++) flux[i] = flux[i]! + sigma[i]! * noise[i]!;
  hit(flux, sigma, instrument.cosmicHits, chance);
  const bad = blinded(flux, wavelength, instrument, chance);
  const indexOf = (nm: number) => Math.min(n - 1, Math.max(0, Math.round(Math.log(nm / fromNm) / step - 0.5)));
  return {
    spectrum: {
      wavelength,
      flux,
      sigma: instrument.statesSigma ? sigma : null,
      bad,
      fluxKind: 'per_wavelength',
      resolvingPower,
      frame: 'barycentric',
    },
    shown,
    noiseAt: (nm) => {
      const i = indexOf(nm);
      return { relative: sigma[i]! / Math.max(level[i]!, 1e-12 * middle), perNm: 1 / (nm * step) };
    },
    covered: (nm, half) => {
      if (nm - half < wavelength[0]! || nm + half > wavelength[n - 1]!) return false;
      let blind = 0;
      const [from, to] = [indexOf(nm - half), indexOf(nm + half)];
      for (let i = from; i <= to; i++) blind += bad[i]!;
      return blind <= 0.15 * (to - from + 1);
    },
  };
}

/** Slow errors of the flux calibration: two low orders over the range. */
function rippling({ ripple }: Instrument, chance: Chance): (x: number) => number {
  const [a, b] = [ripple * chance.normal(), ripple * chance.normal()];
  return (x) => 1 + a * (x * x - 1 / 3) + b * (x * x * x - 0.6 * x);
}

/** Unit normal noise, mixed with its neighbours so that its size stays 1. */
function smoothNoise(n: number, mixing: number, chance: Chance): Float64Array {
  const white = new Float64Array(n + 2).map(() => chance.normal());
  const norm = Math.sqrt(1 + 2 * mixing * mixing);
  return new Float64Array(n).map((_, i) => (white[i + 1]! + mixing * (white[i]! + white[i + 2]!)) / norm);
}

/** Cosmic hits: one or two samples far up. */
function hit(flux: Float64Array, sigma: Float64Array, count: number, chance: Chance) {
  for (let k = 0; k < count; k++) {
    const i = Math.floor(chance.uniform() * (flux.length - 2));
    const height = chance.logBetween(8, 120) * sigma[i]!;
    flux[i] = flux[i]! + height;
    flux[i + 1] = flux[i + 1]! + height * chance.between(0, 0.4);
  }
}

function blinded(flux: Float64Array, wavelength: Float64Array, instrument: Instrument, chance: Chance): Uint8Array {
  const bad = new Uint8Array(flux.length);
  for (let k = 0; k < instrument.gaps; k++) {
    const from = Math.floor(chance.uniform() * flux.length);
    const width = chance.logBetween(0.0004, 0.006) * wavelength[from]!;
    for (let i = from; i < flux.length && wavelength[i]! < wavelength[from]! + width; i++) {
      bad[i] = 1;
      flux[i] = NaN;
    }
  }
  return bad;
}
