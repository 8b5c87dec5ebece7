import { refuse, quoted } from '../refusal.js';
import type { ColumnFact, ColumnRole, ReadingCorrections, Stated, UncertaintyKind, UncorrectedColumns } from '../types.js';
import { corrected } from '../corrections.js';
import { parseAxisUnit } from './axis-unit.js';
import { fluxKindOfUnit } from './flux-unit.js';
import { axisQuantity, nameRole, type SpectralQuantity } from './words.js';

/** What is known of a column before its values are looked at. */
export interface ColumnInfo {
  readonly name: string;
  /** '' when the file gives none */
  readonly unit: string;
  readonly ucd: string;
  readonly utype: string;
  readonly numeric: boolean;
}

/** Which columns make the spectrum, as indices. */
export interface ColumnChoice {
  readonly axis: number;
  readonly quantity: SpectralQuantity;
  readonly flux: number;
  readonly uncertainty: number | null;
  readonly uncertaintyKind: UncertaintyKind;
  readonly mask: number | null;
}

type Role = 'axis' | 'flux' | UncertaintyKind | 'mask';
interface Claim {
  readonly role: Role;
  readonly strength: number;
  readonly quantity?: SpectralQuantity;
}

/** Utypes decide before UCDs, UCDs before names, names before units. */
const BY_UTYPE = 400;
const BY_UCD = 200;
const MAIN_FLUX = 100;
const BY_NAME = 10;

/** Model fields of the IVOA Spectrum Data Model 1.2, in the spelling that is left after prefix and case are taken off. */
const UTYPES: Record<string, Role> = {
  'data.spectralaxis.value': 'axis',
  'data.fluxaxis.value': 'flux',
  'data.fluxaxis.accuracy.staterror': 'sigma',
  'data.fluxaxis.quality': 'mask',
};

function byUtype(utype: string): Role | null {
  const lower = utype.trim().toLowerCase();
  // arrays beside the main ones carry this prefix in archive products
  if (lower.startsWith('eso:')) return null;
  return UTYPES[lower.replace(/^[^:]*:/, '').replace(/^spectrum\./, '')] ?? null;
}

const UCD_QUANTITIES: [string, SpectralQuantity][] = [
  ['em.wl', 'length'],
  ['em.freq', 'frequency'],
  ['em.energy', 'energy'],
  ['em.wavenumber', 'wavenumber'],
];

function byUcd(ucd: string): { role: Role; quantity?: SpectralQuantity; main?: boolean } | null {
  const parts = ucd.trim().toLowerCase().split(';');
  if (parts[0] === 'arith.ratio') parts.shift();
  const first = parts[0] ?? '';
  const quantity = UCD_QUANTITIES.find(([word]) => first === word || first.startsWith(`${word}.`))?.[1];
  if (quantity) return { role: 'axis', quantity };
  if (/^(?:phot\.(?:flux|count)|spect\.)/.test(first) || first === 'phot') return { role: 'flux', main: parts.includes('meta.main') };
  if (first === 'stat.error' && parts.some((part) => part.startsWith('phot.'))) return { role: 'sigma', main: parts.includes('meta.main') };
  return first === 'meta.code.qual' ? { role: 'mask' } : null;
}

/** Everything that speaks for a role of a column; the strongest claim first. */
function claims(info: ColumnInfo): Claim[] {
  // a unit in brackets is no part of the name
  const name = info.name.replace(/\s*[([].*$/, '') || info.name;
  const named = axisQuantity(name);
  const role = nameRole(name);
  const quantity = named ?? undefined;
  const nameStrength = named ? (named === 'velocity' ? 2 : 9) : (role?.strength ?? 0);
  const found: Claim[] = [];
  const utype = byUtype(info.utype);
  if (utype) found.push({ role: utype, strength: BY_UTYPE + nameStrength, quantity });
  const ucd = byUcd(info.ucd);
  if (ucd) found.push({ role: ucd.role, strength: BY_UCD + (ucd.main ? MAIN_FLUX : 0) + nameStrength, quantity: quantity ?? ucd.quantity });
  if (named) found.push({ role: 'axis', strength: BY_NAME + nameStrength, quantity: named });
  else if (role) found.push({ role: role.role, strength: BY_NAME + role.strength });
  else if (found.length === 0) found.push(...byUnit(info));
  return found;
}

/** A name that says nothing may still carry a unit that can only be an axis, or only a flux. */
function byUnit(info: ColumnInfo): Claim[] {
  if (info.unit === '') return [];
  const unit = parseAxisUnit(info.unit);
  if (unit && unit.unit !== 'velocity') return [{ role: 'axis', strength: 1 }];
  return fluxKindOfUnit(info.unit) ? [{ role: 'flux', strength: 1 }] : [];
}

/** Quantity of an axis whose name does not tell: by its unit, else a length. */
function quantityOfUnit(unitText: string): SpectralQuantity {
  const parsed = parseAxisUnit(unitText);
  if (!parsed) return 'length';
  if (parsed.log10) return 'log10_length';
  if (parsed.unit === 'hz' || parsed.unit === 'ghz' || parsed.unit === 'thz') return 'frequency';
  if (parsed.unit === 'ev' || parsed.unit === 'kev') return 'energy';
  if (parsed.unit === 'wavenumber_per_cm' || parsed.unit === 'wavenumber_per_m') return 'wavenumber';
  return parsed.unit === 'velocity' ? 'velocity' : 'length';
}

/**
 * Which columns are wavelength, flux, uncertainty and mask. A correction by name goes first.
 * @returns null when there is no spectral axis or no flux among them
 */
export function chooseColumns(infos: readonly ColumnInfo[], corrections: ReadingCorrections): ColumnChoice | null {
  const all = infos.map((info) => (info.numeric ? claims(info) : []));
  const taken = new Set<number>();
  const best = (wanted: (role: Role) => boolean): { index: number; claim: Claim } | null => {
    let winner: { index: number; claim: Claim } | null = null;
    all.forEach((list, index) => {
      if (taken.has(index)) return;
      for (const claim of list) if (wanted(claim.role) && claim.strength > (winner?.claim.strength ?? 0)) winner = { index, claim };
    });
    if (winner) taken.add((winner as { index: number }).index);
    return winner;
  };
  const named = (name: string | null | undefined): number | null => {
    if (name == null) return null;
    const index = infos.findIndex((info) => info.name === name);
    if (index < 0 || !infos[index]!.numeric)
      refuse('column_not_found', `There is no numeric column "${quoted(name)}" here. Choose one of the columns of the file.`, {
        column: name,
      });
    taken.add(index);
    return index;
  };
  const axisSet = named(corrections.wavelengthColumn);
  const fluxSet = named(corrections.fluxColumn);
  const errorSet = named(corrections.uncertaintyColumn);
  const maskSet = named(corrections.maskColumn);

  const axisFound = axisSet === null ? best((role) => role === 'axis') : null;
  const fluxFound = fluxSet === null ? best((role) => role === 'flux') : null;
  const isError = (role: Role) => role === 'sigma' || role === 'variance' || role === 'inverse_variance';
  const errorFound = errorSet === null && corrections.uncertaintyColumn !== null ? best(isError) : null;
  const maskFound = maskSet === null && corrections.maskColumn !== null ? best((role) => role === 'mask') : null;

  const axis = axisSet ?? axisFound?.index;
  const flux = fluxSet ?? fluxFound?.index;
  if (axis === undefined || flux === undefined) return null;
  const info = infos[axis]!;
  return {
    axis,
    quantity: axisFound?.claim.quantity ?? axisQuantity(info.name) ?? quantityOfUnit(info.unit),
    flux,
    uncertainty: errorSet ?? errorFound?.index ?? null,
    uncertaintyKind: errorFound ? (errorFound.claim.role as UncertaintyKind) : kindOfName(infos, errorSet),
    mask: maskSet ?? maskFound?.index ?? null,
  };
}

/** The columns with the roles that the choice gives them; without a choice none has one. */
export function columnFacts(infos: readonly ColumnInfo[], choice: ColumnChoice | null): ColumnFact[] {
  const roles: [ColumnRole, number | null | undefined][] = [
    ['wavelength', choice?.axis],
    ['flux', choice?.flux],
    ['uncertainty', choice?.uncertainty],
    ['mask', choice?.mask],
  ];
  return infos.map(({ name, unit, ucd, utype, numeric }, i) => ({
    ...{ name, unit, ucd, utype, numeric },
    role: roles.find(([, index]) => index === i)?.[0] ?? null,
  }));
}

/** Names of the columns that would have been taken without the corrections that name columns; nothing where none was named. */
export function uncorrectedColumns(infos: readonly ColumnInfo[], corrections: ReadingCorrections): UncorrectedColumns {
  const { wavelengthColumn, fluxColumn, uncertaintyColumn, maskColumn, ...rest } = corrections;
  if ([wavelengthColumn, fluxColumn, uncertaintyColumn, maskColumn].every((name) => name === undefined)) return {};
  const own = chooseColumns(infos, rest);
  const nameOf = (index: number | null | undefined) => (index == null ? null : infos[index]!.name);
  return {
    ...(wavelengthColumn === undefined ? {} : { wavelengthColumn: nameOf(own?.axis) }),
    ...(fluxColumn === undefined ? {} : { fluxColumn: nameOf(own?.flux) }),
    ...(uncertaintyColumn === undefined ? {} : { uncertaintyColumn: nameOf(own?.uncertainty) }),
    ...(maskColumn === undefined ? {} : { maskColumn: nameOf(own?.mask) }),
  };
}

/** How the uncertainty is known to be what it is. */
export function statedKind(
  kind: UncertaintyKind,
  known: Omit<Stated<UncertaintyKind>, 'value'>,
  corrections: ReadingCorrections,
): Stated<UncertaintyKind> {
  return corrected(corrections.uncertaintyKind, { value: kind, ...known });
}

function kindOfName(infos: readonly ColumnInfo[], index: number | null): UncertaintyKind {
  const role = index === null ? null : nameRole(infos[index]!.name)?.role;
  return role === 'variance' || role === 'inverse_variance' ? role : 'sigma';
}
