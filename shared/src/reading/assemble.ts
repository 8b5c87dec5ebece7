import type { Spectrum } from '../spectrum/index.js';
import { AIR_STARTS_NM, hzPerNm, toVacuumInPlace, type Medium } from '../units/index.js';
import { cgsPerHz } from './columns/flux-unit.js';
import { assumed, notStated } from './columns/medium.js';
import { checkAxis, checkFlux, checkSize, isWavelength } from './checks.js';
import { corrected } from './corrections.js';
import { observed } from './observation.js';
import { segmentsOf } from './segments.js';
import { mergeDuplicates, type Columns } from './merge.js';
import { ascendingOrder } from './order.js';
import type { RawSpectrum } from './raw.js';
import { quoted } from './refusal.js';
import type { ReadingCorrections, ReadResult, ReadWarning, Stated } from './types.js';
import { badSamples, sigmaOf } from './uncertainty.js';

/** From the columns as they stand in the file to a spectrum in vacuum nm, ascending, with bad samples marked. */
export function assemble(raw: RawSpectrum, corrections: ReadingCorrections): Extract<ReadResult, { ok: true }> {
  const warnings: ReadWarning[] = [...raw.warnings];
  const points = raw.flux.length;
  checkAxis(raw, warnings);
  checkFlux(raw, warnings);
  const sigma = sigmaOf(raw, warnings);
  const { firstNm, lastNm } = ends(raw.axis.nm);
  const medium = settleMedium(raw, corrections, Math.max(firstNm, lastNm));
  toVacuumInPlace(raw.axis.nm, medium.value);
  const fluxKind = corrected(corrections.fluxKind, raw.fluxKind);
  const convertedFluxUnit = fluxKind.value === 'per_frequency' ? perWavelength(raw, sigma, warnings) : undefined;

  const { bad, maskUsed } = badSamples(raw, sigma, corrections.maskColumn !== undefined, warnings);
  const { index, piece, names } = ascendingOrder(raw, bad, warnings);
  const ordered = { ...inOrder({ wavelength: raw.axis.nm, flux: raw.flux, sigma, bad }, index), piece };
  const { piece: merged, ...columns } = mergeDuplicates(ordered, raw.axisName, warnings);
  checkSize(columns, raw.fluxName, warnings);

  const { facts } = raw;
  const frame = corrected(corrections.frame, facts.frame);
  const resolvingPower = corrected<number | null>(corrections.resolvingPower, facts.resolvingPower);
  const observation = observed(facts, frame.value, corrections, warnings);
  const segments = segmentsOf(merged, names, columns.wavelength.length);
  const spectrum: Spectrum = {
    ...columns,
    fluxKind: fluxKind.value === 'per_frequency' ? 'per_wavelength' : fluxKind.value,
    fluxCalibration: facts.fluxCalibration.value,
    resolvingPower: resolvingPower.value,
    frame: frame.value,
    segments,
    observerVelocityKmPerS: observation.observerVelocityKmPerS.value,
  };
  return {
    ok: true,
    spectrum,
    reading: {
      format: raw.format,
      place: raw.place,
      points,
      objectName: corrected<string | null>(corrections.objectName, facts.objectName),
      wavelengthColumn: raw.axisName,
      axisUnit: raw.axis.unit,
      medium,
      frame,
      fluxColumn: raw.fluxName,
      fluxUnit: raw.fluxUnit,
      ...(convertedFluxUnit === undefined ? {} : { convertedFluxUnit }),
      fluxKind,
      uncertaintyColumn: sigma ? raw.uncertainty!.name : null,
      uncertaintyKind: sigma ? raw.uncertainty!.kind : notStated(null),
      maskColumn: maskUsed ? raw.mask!.name : null,
      resolvingPower,
      fluxCalibration: facts.fluxCalibration,
      wavelengthRmsNm: facts.wavelengthRmsNm,
      ...observation,
      instrument: facts.instrument,
      telescope: facts.telescope,
      firstNm,
      lastNm,
      columns: raw.columnFacts.filter((fact) => fact.numeric).map((fact) => fact.name),
      columnFacts: raw.columnFacts,
      uncorrectedColumns: raw.uncorrectedColumns,
      otherPlaces: raw.places.filter((one) => one.isSpectrum && one.place !== raw.place).map((one) => one.place),
      places: raw.places,
      checksums: raw.checksums,
      segments,
      header: raw.header,
      warnings,
    },
  };
}

function ends(nm: Float64Array): { firstNm: number; lastNm: number } {
  return { firstNm: nm.find(isWavelength) ?? NaN, lastNm: nm.findLast(isWavelength) ?? NaN };
}

function settleMedium(raw: RawSpectrum, corrections: ReadingCorrections, longestNm: number): Stated<Medium> {
  const found = raw.axis.medium ?? raw.medium;
  const usual: Stated<Medium> =
    longestNm < AIR_STARTS_NM ? assumed('vacuum', 'below 200 nm wavelengths are vacuum by convention') : notStated('vacuum');
  return corrected(corrections.medium, found ?? usual);
}

/** Flux and sigma per frequency become flux per wavelength, in place; the axis is in vacuum nm here. @returns the new unit */
function perWavelength(raw: RawSpectrum, sigma: Float64Array | null, warnings: ReadWarning[]): string {
  const perHz = cgsPerHz(raw.fluxUnit.value);
  // erg s-1 cm-2 Hz-1 times Hz per nm, over ten, is erg s-1 cm-2 Angstrom-1
  const scale = (perHz ?? 1) * 0.1;
  const { flux } = raw;
  const nm = raw.axis.nm;
  for (let i = 0; i < flux.length; i++) {
    const factor = scale * hzPerNm(nm[i]!);
    const converted = flux[i]! * factor;
    flux[i] = Number.isFinite(converted) ? converted : NaN;
    if (sigma) sigma[i] = sigma[i]! * factor;
  }
  const unit = perHz === null ? '' : 'erg s-1 cm-2 Angstrom-1';
  warnings.push({
    code: 'flux_converted',
    sentence: `The flux is per frequency (${quoted(raw.fluxUnit.value || 'no unit')}); it was converted to flux per wavelength${unit && `, ${unit}`}.`,
    column: raw.fluxName,
  });
  return unit;
}

type Unpieced = Omit<Columns, 'piece'>;

/** The columns in the order of `index`; the same arrays when that is the order they are in. */
function inOrder(columns: Unpieced, index: Uint32Array): Unpieced {
  const { wavelength, flux, sigma, bad } = columns;
  if (index.length === wavelength.length && index.every((value, position) => value === position)) return columns;
  return {
    wavelength: gather(wavelength, index),
    flux: gather(flux, index),
    sigma: sigma && gather(sigma, index),
    bad: gatherBytes(bad, index),
  };
}

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
