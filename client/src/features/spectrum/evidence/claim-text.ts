import { C_KM_PER_S, type Feature, type FeatureFlag } from '@foreveil/shared';
import { speciesName } from '../../../lib/species.js';
import { MILLIANGSTROM_PER_NM, probability, signed, withError } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shownPerNm, shownWavelength } from '../../../plot/axis-ticks.js';
import { type Reading } from '../lines/reading.js';

const WHERE: Record<Reading['family'], string> = {
  stellar: 'in the star',
  interstellar: 'in the cloud',
  nebular: 'in the nebula',
  telluric: 'in the air',
  unidentified: '',
};

/** 'Na I 589.1583' in the shown unit. */
export function readingName(reading: Reading, display: WavelengthDisplay, digitsInNm = 4): string {
  if (reading.species === null) return 'unidentified';
  const rest = reading.restNm === null ? '' : ` ${shownWavelength(reading.restNm, display, digitsInNm)}`;
  return speciesName(reading.species) + rest;
}

/** The claim in one sentence: 'Na I 589.1583 nm in the cloud at −3.98 km/s: 0.973'. */
export function claimTitle(reading: Reading, systemVelocity: number | null, display: WavelengthDisplay): string {
  if (reading.species === null) return `Not a line of the list: ${probability(reading.probability)}`;
  const velocity = systemVelocity ?? reading.velocityKmPerS;
  const at = velocity === null ? '' : ` at ${signed(velocity, 2)} km/s`;
  return `${readingName(reading, display)} ${display.unitLabel} ${WHERE[reading.family]}${at}: ${probability(reading.probability)}`;
}

export const FLAG_WORD: Record<FeatureFlag, string> = {
  cosmic: 'looks like a cosmic ray',
  blend: 'blended',
  saturated: 'saturated',
  edge: 'cut by an edge',
  band: 'a band',
  sky: 'on a sky line',
  by_hand: 'placed by a person',
};

export const widthKmPerS = ({ fwhmNm, wavelengthNm }: Feature) => (fwhmNm / wavelengthNm) * C_KM_PER_S;
export const widthSigmaKmPerS = ({ fwhmSigmaNm, wavelengthNm }: Feature) => (fwhmSigmaNm / wavelengthNm) * C_KM_PER_S;

/** What was measured, one line: wavelength, equivalent width, FWHM, flags. */
export function measurement(feature: Feature, display: WavelengthDisplay): string {
  const scale = shownPerNm(feature.wavelengthNm, display);
  const place = withError(display.show(feature.wavelengthNm), feature.wavelengthSigmaNm * scale);
  const width = withError(feature.equivalentWidthNm * MILLIANGSTROM_PER_NM, feature.equivalentWidthSigmaNm * MILLIANGSTROM_PER_NM);
  const fwhm = withError(widthKmPerS(feature), widthSigmaKmPerS(feature));
  const flags = feature.flags.map((f) => FLAG_WORD[f]);
  return [`${place} ${display.unitLabel}`, `W ${width} mÅ`, `${fwhm} km/s wide`, ...flags].join(', ');
}
