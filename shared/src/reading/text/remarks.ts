import { mediumWord } from '../columns/words.js';
import { parseAxisUnit } from '../columns/axis-unit.js';
import { notStated, parseFrame, stated } from '../columns/medium.js';
import { fluxCalibrationOf, plainKey, wavelengthRmsOf, type FactSource } from '../facts/source.js';
import { whenOf } from '../facts/when.js';
import { pointingOf, siteOf } from '../facts/where.js';
import type { Facts } from '../raw.js';
import type { Medium } from '../../units/index.js';
import type { Stated } from '../types.js';

/** What the remarks in front of a table say. */
export interface Remarks {
  readonly facts: Facts;
  readonly medium: Stated<Medium> | null;
  /** unit of the wavelengths; '' when no remark gives it */
  readonly axisUnit: string;
  readonly axisUnitWhere: string;
  readonly fluxUnit: string;
}

interface Pair {
  readonly key: string;
  readonly value: string;
  readonly where: string;
}

/** Without the mark that makes a line a remark. */
export const remarkText = (line: string): string => line.replace(/^\s*(?:[#%!\\]+|\/\/)\s?/, '');

/** 'key: value' and 'key = value' of remarks; keys in lower case with blanks for underscores. */
function pairsOf(remarks: readonly string[]): Pair[] {
  return remarks.flatMap((remark) => {
    const match = /^\s*([\p{L}][\p{L}\p{N} _.-]{0,40}?)\s*[:=]\s*(\S.*)$/u.exec(remarkText(remark).slice(0, 500));
    if (!match) return [];
    return [{ key: plainKey(match[1]!), value: match[2]!.trim().replace(/^(['"])(.*)\1$/, '$2'), where: `remark "${match[1]!}"` }];
  });
}

export function readRemarks(remarks: readonly string[]): Remarks {
  const pairs = pairsOf(remarks);
  const find = (...keys: string[]) => pairs.find((pair) => keys.includes(pair.key)) ?? null;
  const object = find('object', 'target', 'star', 'object name', 'target name', 'objname');
  const frame = find('frame', 'velocity frame', 'specsys', 'rest frame', 'reference frame', 'spectral frame');
  const parsedFrame = frame && parseFrame(frame.value);
  const power = find('resolving power', 'spec rp', 'spec res', 'resolution', 'r');
  const source = sourceOf(pairs);
  const unit = axisUnitOf(remarks, pairs);
  return {
    facts: {
      objectName: object ? stated(object.value, object.where) : notStated(null),
      frame: parsedFrame ? stated(parsedFrame, frame.where) : notStated('unknown'),
      resolvingPower: resolvingPowerOf(power),
      fluxCalibration: fluxCalibrationOf(source),
      wavelengthRmsNm: wavelengthRmsOf(source),
      ...whenOf(source),
      site: siteOf(source),
      pointing: pointingOf(source),
      instrument: find('instrument', 'instrume', 'spectrograph')?.value ?? null,
      telescope: find('telescope', 'telescop')?.value ?? null,
    },
    medium: mediumOf(remarks, pairs),
    axisUnit: unit?.value ?? '',
    axisUnitWhere: unit?.where ?? '',
    fluxUnit: find('flux unit', 'flux units', 'unit of flux')?.value ?? '',
  };
}

function resolvingPowerOf(pair: Pair | null): Stated<number | null> {
  const value = Number(/^[\d.]+(?:e\d+)?/i.exec(pair?.value ?? '')?.[0] ?? NaN);
  // a small number under such a name is a width, not lambda over width
  return pair && value >= 50 ? stated(value, pair.where) : notStated(null);
}

/** Keys of remarks that mean a card of FITS under another name. */
const ALSO: Partial<Record<string, string>> = { 'date obs': 'date', longitud: 'lon', latitude: 'lat' };

/** The remarks as a place to look facts up. */
function sourceOf(pairs: readonly Pair[]): FactSource {
  const find = (keywords: readonly string[]) => {
    for (const keyword of keywords) {
      const key = plainKey(keyword);
      const pair = pairs.find((one) => one.key === key) ?? pairs.find((one) => one.key === ALSO[key]);
      if (pair) return pair;
    }
    return null;
  };
  return {
    text: (...keywords) => find(keywords),
    number: (...keywords) => {
      const pair = find(keywords);
      const match = /^([+-]?\d+(?:\.\d*)?(?:e[+-]?\d+)?)\s*(?:m|deg|degrees|°|d|days?)?$/i.exec(pair?.value ?? '');
      return pair && match ? { value: Number(match[1]), where: pair.where } : null;
    },
  };
}

const MEDIUM_KEYS = [
  'medium',
  'wavelength medium',
  'wavelengths',
  'wavelength',
  'wavelength unit',
  'wavelength units',
  'air or vacuum',
  'airorvac',
];

function mediumOf(remarks: readonly string[], pairs: readonly Pair[]): Stated<Medium> | null {
  for (const pair of pairs) {
    const word = MEDIUM_KEYS.includes(pair.key) ? mediumWord(pair.value) : null;
    if (word) return stated(word, pair.where);
  }
  for (const remark of remarks) {
    const text = remark.slice(0, 500);
    const near =
      /\b(?:in\s+)?(air|vacuum|vac)[\s-]+(?:wavelengths?|wave|scale)\b/i.exec(text) ??
      /\bwave(?:lengths?|s)?\b.{0,60}?\b(air|vacuum|vac)\b/i.exec(text);
    if (near) return stated(near[1]!.toLowerCase() === 'air' ? 'air' : 'vacuum', 'remark on wavelengths');
  }
  return null;
}

const UNIT_KEYS = [
  'wavelength unit',
  'wavelength units',
  'wave unit',
  'waveunit',
  'axis unit',
  'x unit',
  'unit of wavelength',
  'wavelength',
];
/** Units written out, so that no letter of another word is taken for one; not after a slash, where they belong to the flux. */
const UNIT_WORD =
  /(?<![/\p{L}])(angstroms?|ångströms?|nm|nanomet(?:er|re)s?|microns?|micromet(?:er|re)s?|[uµμ]m|cm-1|cm\^-1)(?![\p{L}\d])/iu;

function axisUnitOf(remarks: readonly string[], pairs: readonly Pair[]): { value: string; where: string } | null {
  for (const pair of pairs) {
    if (!UNIT_KEYS.includes(pair.key)) continue;
    const first = pair.value.split(/[\s,;(]/)[0]!;
    const word = parseAxisUnit(first) ? first : UNIT_WORD.exec(pair.value)?.[1];
    if (word) return { value: word, where: pair.where };
  }
  for (const remark of remarks) {
    const text = remark.slice(0, 500);
    const about = /\b(?:wave(?:lengths?)?|lam(?:bda)?)\b/i.exec(text);
    const word = about && UNIT_WORD.exec(text.slice(about.index));
    if (word) return { value: word[1]!, where: 'remark on wavelengths' };
  }
  return null;
}
