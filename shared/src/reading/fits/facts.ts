import type { Frame } from '../../spectrum/index.js';
import type { Medium } from '../../units/index.js';
import { notStated, parseFrame, stated } from '../columns/medium.js';
import { fluxCalibrationOf, wavelengthRmsOf, type FactSource, type Found } from '../facts/source.js';
import { whenOf } from '../facts/when.js';
import { pointingOf, siteOf } from '../facts/where.js';
import type { Facts } from '../raw.js';
import { quoted } from '../refusal.js';
import type { ReadWarning, Stated } from '../types.js';
import type { Header } from './header.js';

/** The headers that speak for a spectrum, the closest first: that of its own unit, then the primary one. */
export type Headers = readonly Header[];

function firstText(headers: Headers, ...keywords: string[]): Found<string> | null {
  for (const keyword of keywords)
    for (const header of headers) {
      const value = header.text(keyword);
      if (value !== null) return { value, where: keyword };
    }
  return null;
}

function firstNumber(headers: Headers, ...keywords: string[]): Found<number> | null {
  for (const keyword of keywords)
    for (const header of headers) {
      const value = header.number(keyword);
      if (value !== null) return { value, where: keyword };
    }
  return null;
}

/** What the headers say of the observation. */
export function readFacts(headers: Headers, warnings: ReadWarning[]): Facts {
  const source: FactSource = {
    text: (...keywords) => firstText(headers, ...keywords),
    number: (...keywords) => firstNumber(headers, ...keywords),
  };
  const object = firstText(headers, 'OBJECT', 'TARGNAME', 'TARGET', 'OBJNAME');
  return {
    objectName: object ? stated(object.value, object.where) : notStated(null),
    frame: frameOf(headers, warnings),
    resolvingPower: resolvingPowerOf(headers),
    fluxCalibration: fluxCalibrationOf(source),
    wavelengthRmsNm: wavelengthRmsOf(source),
    ...whenOf(source),
    site: siteOf(source),
    pointing: pointingOf(source),
    instrument: firstText(headers, 'INSTRUME', 'BSS_INST')?.value ?? null,
    telescope: firstText(headers, 'TELESCOP')?.value ?? null,
  };
}

function frameOf(headers: Headers, warnings: ReadWarning[]): Stated<Frame> {
  const specsys = firstText(headers, 'SPECSYS', 'SPECSYSA');
  if (specsys) {
    const frame = parseFrame(specsys.value);
    if (frame) return stated(frame, specsys.where);
    warnings.push({
      code: 'frame_unknown',
      sentence: `The velocity frame ${specsys.where} = '${quoted(specsys.value)}' is not one that is known here; the frame counts as unknown.`,
    });
  }
  const correction = heliocentricCard(headers);
  return correction ? stated('heliocentric', correction) : notStated('unknown');
}

/** The card by which a reduction system says that it brought the wavelengths to the Sun; null when none does. */
function heliocentricCard(headers: Headers): string | null {
  if (firstText(headers, 'HELCORR')?.value.toUpperCase() === 'COMPLETE') return 'HELCORR';
  if (headers.some((header) => header.get('HELIO') === true)) return 'HELIO';
  // the correction that was applied, km/s; exactly zero stands for none
  const applied = firstNumber(headers, 'HELIO_RV', 'BSS_VHEL');
  return applied && applied.value !== 0 ? applied.where : null;
}

/** SPEC_RP is lambda / FWHM. Archives write the same into SPEC_RES, the data model a width in the axis unit there. */
function resolvingPowerOf(headers: Headers): Stated<number | null> {
  const direct = firstNumber(headers, 'SPEC_RP', 'BSS_ITRP', 'AAV_ITRP');
  if (direct && direct.value > 0) return stated(direct.value, direct.where);
  const either = firstNumber(headers, 'SPEC_RES');
  if (either && either.value >= 50) return stated(either.value, either.where);
  return notStated(null);
}

/** Medium of the wavelengths by cards that say it for the whole file. */
export function mediumOfCards(headers: Headers): Stated<Medium> | null {
  for (const header of headers) {
    const vacuum = header.get('VACUUM');
    if (vacuum === true || vacuum === 1) return stated('vacuum', 'VACUUM');
    if (vacuum === false || vacuum === 0) return stated('air', 'VACUUM');
  }
  const word = firstText(headers, 'AIRORVAC', 'WAVEMED', 'WAVE_MED', 'MEDIUM');
  const value = word?.value.toLowerCase() ?? '';
  if (value.startsWith('vac')) return stated('vacuum', word!.where);
  return value.startsWith('air') ? stated('air', word!.where) : null;
}

/** Whether a card says that the continuum was divided out. */
export const saysNormalised = (headers: Headers): boolean => headers.some((header) => header.get('CONTNORM') === true);

/** Unit of the data of the whole file; '' when there is none. */
export const dataUnit = (headers: Headers): string => firstText(headers, 'BUNIT')?.value ?? '';

/**
 * Bits of a quality column that mean "do not use": the ones that Hubble's files name in SDQFLAGS, bit 0 in Webb's. Null:
 * every bit.
 */
export function qualityBits(headers: Headers): number | null {
  const serious = firstNumber(headers, 'SDQFLAGS');
  if (serious && Number.isInteger(serious.value) && serious.value > 0) return serious.value;
  return firstText(headers, 'TELESCOP')?.value.toUpperCase() === 'JWST' ? 1 : null;
}
