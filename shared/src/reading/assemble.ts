import type { FluxKind, Spectrum } from '../spectrum/index.js';
import { AIR_STARTS_NM, hzPerNm, toVacuumInPlace, type Medium } from '../units/index.js';
import { cgsPerHz } from './columns/flux-unit.js';
import { assumed, notStated } from './columns/medium.js';
import { ascendingOrder, groupsOfEqual } from './order.js';
import type { RawSpectrum } from './raw.js';
import { quoted, refuse } from './refusal.js';
import type { ReadingCorrections, ReadResult, ReadWarning, Stated } from './types.js';
import { badSamples, sigmaOf } from './uncertainty.js';

/** From the columns as they stand in the file to a spectrum in vacuum nm, ascending, with bad samples marked. */
export function assemble(raw: RawSpectrum, corrections: ReadingCorrections): Extract<ReadResult, { ok: true }> {
  const warnings: ReadWarning[] = [...raw.warnings];
  const points = raw.flux.length;
  checkAxis(raw, warnings);
  checkFlux(raw, warnings);
  const sigma = sigmaOf(raw, warnings);
  const bad = badSamples(raw, sigma, warnings);
  const { firstNm, lastNm } = ends(raw.axis.nm);
  const medium = settleMedium(raw, corrections, Math.max(firstNm, lastNm));
  toVacuumInPlace(raw.axis.nm, medium.value);
  const fluxKind: Stated<FluxKind> = corrections.fluxKind
    ? { value: corrections.fluxKind, how: 'corrected', where: 'correction' }
    : raw.fluxKind;
  if (fluxKind.value === 'per_frequency') perWavelength(raw, sigma, warnings);

  const index = ascendingOrder(raw, bad, warnings);
  const columns = mergeDuplicates(
    {
      wavelength: gather(raw.axis.nm, index),
      flux: gather(raw.flux, index),
      sigma: sigma && gather(sigma, index),
      bad: index.length === bad.length && isIdentity(index) ? bad : gatherBytes(bad, index),
    },
    raw.axisName,
    warnings,
  );
  checkSize(columns.wavelength.length, warnings);

  const frame = corrections.frame ? { value: corrections.frame, how: 'corrected' as const, where: 'correction' } : raw.facts.frame;
  const resolvingPower =
    corrections.resolvingPower === undefined
      ? raw.facts.resolvingPower
      : { value: corrections.resolvingPower, how: 'corrected' as const, where: 'correction' };
  const spectrum: Spectrum = {
    ...columns,
    fluxKind: fluxKind.value === 'per_frequency' ? 'per_wavelength' : fluxKind.value,
    resolvingPower: resolvingPower.value,
    frame: frame.value,
  };
  const { facts } = raw;
  return {
    ok: true,
    spectrum,
    reading: {
      format: raw.format,
      place: raw.place,
      points,
      objectName: facts.objectName,
      wavelengthColumn: raw.axisName,
      axisUnit: raw.axis.unit,
      medium,
      frame,
      fluxColumn: raw.fluxName,
      fluxUnit: raw.fluxUnit,
      fluxKind,
      uncertaintyColumn: sigma ? raw.uncertainty!.name : null,
      uncertaintyKind: sigma ? raw.uncertainty!.kind : notStated(null),
      maskColumn: raw.mask?.name ?? null,
      resolvingPower,
      observedAt: facts.observedAt,
      instrument: facts.instrument,
      telescope: facts.telescope,
      raDeg: facts.raDeg,
      decDeg: facts.decDeg,
      firstNm,
      lastNm,
      columns: raw.columns,
      otherPlaces: raw.otherPlaces,
      header: raw.header,
      warnings,
    },
  };
}

function checkAxis(raw: RawSpectrum, warnings: ReadWarning[]) {
  const nm = raw.axis.nm;
  let usable = 0;
  let firstUnusable = -1;
  for (let i = 0; i < nm.length; i++) {
    const value = nm[i]!;
    if (value < 0) {
      const at = raw.locate(i);
      refuse(
        'negative_wavelength',
        `The wavelength at ${at.words} is negative (column ${quoted(raw.axisName)}); wavelengths must be positive. Check which column holds the wavelengths.`,
        {
          row: at.row,
          column: raw.axisName,
        },
      );
    }
    if (value > 0 && value < Infinity) usable++;
    else if (firstUnusable < 0) firstUnusable = i;
  }
  if (usable === 0 && nm.length > 0)
    refuse(
      'no_wavelength',
      `There is no valid wavelength: every value of ${quoted(raw.axisName)} is missing, not a number (NaN), zero or out of range (infinite).`,
      {
        column: raw.axisName,
      },
    );
  if (firstUnusable < 0) return;
  const at = raw.locate(firstUnusable);
  warnings.push({
    code: 'no_wavelength',
    sentence: `${nm.length - usable} samples were left out because their wavelength is missing, zero or not finite (first at ${at.words}).`,
    row: at.row,
    column: raw.axisName,
  });
}

function checkFlux(raw: RawSpectrum, warnings: ReadWarning[]) {
  const { flux } = raw;
  let min = Infinity;
  let max = -Infinity;
  let missing = 0;
  for (let i = 0; i < flux.length; i++) {
    const value = flux[i]!;
    if (!Number.isFinite(value)) {
      // an infinite flux is as useless as a missing one, and NaN says so
      flux[i] = NaN;
      missing++;
      continue;
    }
    if (value < min) min = value;
    if (value > max) max = value;
  }
  if (missing === flux.length && missing > 0)
    refuse(
      'no_flux',
      `There is no valid flux: every value of column ${quoted(raw.fluxName)} is missing (null) or not a number (NaN). Choose another flux column.`,
      {
        column: raw.fluxName,
      },
    );
  if (missing > 0)
    warnings.push({
      code: 'missing_flux',
      sentence: `${missing} samples have no flux (missing, NaN or infinite) and are not used.`,
      column: raw.fluxName,
    });
  if (min === max && flux.length > 1)
    warnings.push({
      code: 'constant_flux',
      sentence: `The flux is constant: every value of column ${quoted(raw.fluxName)} is ${min}. There is nothing to find in it.`,
      column: raw.fluxName,
    });
}

function ends(nm: Float64Array): { firstNm: number; lastNm: number } {
  const usable = (value: number) => value > 0 && value < Infinity;
  return { firstNm: nm.find(usable) ?? NaN, lastNm: nm.findLast(usable) ?? NaN };
}

function settleMedium(raw: RawSpectrum, corrections: ReadingCorrections, longestNm: number): Stated<Medium> {
  if (corrections.medium) return { value: corrections.medium, how: 'corrected', where: 'correction' };
  const found = raw.axis.medium ?? raw.medium;
  if (found) return found;
  return longestNm < AIR_STARTS_NM ? assumed('vacuum', 'below 200 nm wavelengths are vacuum by convention') : notStated('vacuum');
}

/** Flux and sigma per frequency become flux per wavelength, in place; the axis is in vacuum nm here. */
function perWavelength(raw: RawSpectrum, sigma: Float64Array | null, warnings: ReadWarning[]) {
  const perHz = cgsPerHz(raw.fluxUnit.value);
  // erg s-1 cm-2 Hz-1 times Hz per nm, over ten, is erg s-1 cm-2 Angstrom-1
  const scale = (perHz ?? 1) * 0.1;
  const { flux } = raw;
  const nm = raw.axis.nm;
  for (let i = 0; i < flux.length; i++) {
    const factor = scale * hzPerNm(nm[i]!);
    flux[i] = flux[i]! * factor;
    if (sigma) sigma[i] = sigma[i]! * factor;
  }
  const unit = perHz === null ? 'a unit per wavelength of the same scale' : 'erg s-1 cm-2 Angstrom-1';
  warnings.push({
    code: 'flux_converted',
    sentence: `The flux is per frequency (${quoted(raw.fluxUnit.value || 'no unit')}); it was converted to flux per wavelength, ${unit}.`,
    column: raw.fluxName,
  });
}

const isIdentity = (index: Uint32Array): boolean => index.every((value, position) => value === position);

function gather(column: Float64Array, index: Uint32Array): Float64Array {
  const out = new Float64Array(index.length);
  for (let i = 0; i < index.length; i++) out[i] = column[index[i]!]!;
  return out;
}

function gatherBytes(column: Uint8Array, index: Uint32Array): Uint8Array {
  const out = new Uint8Array(index.length);
  for (let i = 0; i < index.length; i++) out[i] = column[index[i]!]!;
  return out;
}

interface Columns {
  readonly wavelength: Float64Array;
  readonly flux: Float64Array;
  readonly sigma: Float64Array | null;
  readonly bad: Uint8Array;
}

/** Samples of one wavelength become one: the mean of the good ones, weighted by 1 / sigma^2 where sigma is known. */
function mergeDuplicates(columns: Columns, axisName: string, warnings: ReadWarning[]): Columns {
  const { starts, duplicates } = groupsOfEqual(columns.wavelength, axisName);
  if (duplicates === 0) return columns;
  const n = starts.length;
  const out = {
    wavelength: new Float64Array(n),
    flux: new Float64Array(n),
    sigma: columns.sigma && new Float64Array(n),
    bad: new Uint8Array(n),
  };
  for (let g = 0; g < n; g++) {
    const from = starts[g]!;
    const to = g + 1 < n ? starts[g + 1]! : columns.wavelength.length;
    const mean = to - from === 1 ? sampleAt(columns, from) : meanOf(columns, from, to);
    out.wavelength[g] = columns.wavelength[from]!;
    out.flux[g] = mean.flux;
    out.bad[g] = mean.bad;
    if (out.sigma) out.sigma[g] = mean.sigma;
  }
  warnings.push({
    code: 'duplicates_merged',
    sentence: `${duplicates} duplicate wavelengths were found; samples of the same wavelength were merged into their mean${columns.sigma ? ', weighted by 1/sigma^2' : ''}.`,
    column: axisName,
  });
  return out;
}

const sampleAt = (c: Columns, i: number) => ({ flux: c.flux[i]!, sigma: c.sigma ? c.sigma[i]! : NaN, bad: c.bad[i]! });

function meanOf(c: Columns, from: number, to: number) {
  let weights = 0;
  let sum = 0;
  for (let i = from; i < to; i++) {
    if (c.bad[i]) continue;
    const weight = c.sigma ? 1 / c.sigma[i]! ** 2 : 1;
    weights += weight;
    sum += weight * c.flux[i]!;
  }
  if (!(weights > 0)) return sampleAt(c, from);
  return { flux: sum / weights, sigma: c.sigma ? 1 / Math.sqrt(weights) : NaN, bad: 0 };
}

/** Fewer samples than this cannot hold a continuum and a line. */
const FEW_POINTS = 20;

function checkSize(points: number, warnings: ReadWarning[]) {
  if (points < 2)
    refuse('too_few_points', `The file has ${points === 1 ? 'one usable point' : 'no usable points'}; a spectrum needs at least two.`);
  if (points < FEW_POINTS)
    warnings.push({ code: 'few_points', sentence: `The spectrum has only ${points} points, too few to fit a continuum or a line.` });
}
