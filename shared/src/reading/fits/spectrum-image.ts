import type { ReadContext } from '../context.js';
import { settleAxis } from '../columns/axis.js';
import { statedKind } from '../columns/choose.js';
import { fluxKindOf, settleFluxUnit } from '../columns/flux-kind.js';
import { axisQuantity, nameRole } from '../columns/words.js';
import type { FileFacts, RawSpectrum } from '../raw.js';
import { quoted, refuse } from '../refusal.js';
import type { ColumnFact, ReadingCorrections, UncertaintyKind, UncorrectedColumns } from '../types.js';
import { mediumOfCards, readFacts, saysNormalised, type Headers } from './facts.js';
import type { Hdu } from './hdu.js';
import { imageShape, readBand, type ImageShape } from './image.js';
import { lookUpAxis } from './look-up.js';
import type { ImageAxis } from './axis-place.js';
import { imageAxis } from './wcs.js';

/** A row of an image, or an image of its own, with the words that say what it holds. */
interface Band {
  readonly hdu: Hdu;
  readonly shape: ImageShape;
  readonly band: number;
  readonly label: string;
}

/** An image that can be read as a spectrum. */
export interface ImageCandidate {
  readonly hdu: Hdu;
  readonly shape: ImageShape;
}

/** Looks whether an image is one-dimensional or a few bands; refuses pictures and empty units. */
export function imageCandidate(hdu: Hdu, hdus: readonly Hdu[]): ImageCandidate {
  if (hdu.header.get('ZIMAGE') === true)
    refuse('compressed_fits', `${hdu.place} is a compressed image (ZIMAGE), which is not supported. Uncompress it first.`, {
      card: 'ZIMAGE',
    });
  const shape = imageShape(hdu);
  const label = hdu.header.text('EXTNAME') ?? '';
  if (hdu.index > 0 && label !== '' && isBeside(label))
    refuse('no_spectrum', `${hdu.place} holds no flux but what its name says, ${quoted(label)}.`);
  if (!hasAxis(hdu, shape) && !waveImage(hdu, shape, hdus))
    refuse(
      'no_wavelength_axis',
      `The image in ${hdu.place} has no wavelength calibration: CRVAL${shape.axis} and CDELT${shape.axis} (or CD${shape.axis}_${shape.axis}) are needed to turn pixels into wavelengths.`,
      {
        card: `CRVAL${shape.axis}`,
      },
    );
  return { hdu, shape };
}

/** An image named after the wavelength, an error or a mask goes with a flux, it is not one. */
function isBeside(label: string): boolean {
  if (axisQuantity(label)) return true;
  const role = nameRole(label);
  return role !== null && (role.role !== 'flux' || role.strength < 5);
}

function hasAxis(hdu: Hdu, { axis }: ImageShape): boolean {
  const has = (keyword: string) => hdu.header.number(keyword) !== null;
  return (
    (has(`CRVAL${axis}`) && (has(`CDELT${axis}`) || has(`CD${axis}_${axis}`))) ||
    (has('COEFF0') && has('COEFF1')) ||
    hdu.header.text(`PS${axis}_0`) !== null
  );
}

/** An image extension with the wavelengths of each pixel, by its name and length. */
function waveImage(hdu: Hdu, shape: ImageShape, hdus: readonly Hdu[]): Hdu | undefined {
  return hdus.find(
    (other) =>
      other !== hdu && other.kind === 'image' && axisQuantity(other.header.text('EXTNAME') ?? '') !== null && sameLength(other, shape),
  );
}

function sameLength(hdu: Hdu, shape: ImageShape): boolean {
  const { header } = hdu;
  return header.number('NAXIS') === 1 && header.number('NAXIS1') === shape.length;
}

export function rawFromImage(
  candidate: ImageCandidate,
  hdus: readonly Hdu[],
  headers: Headers,
  file: FileFacts,
  context: ReadContext,
): RawSpectrum {
  const { corrections, warnings } = context;
  const { hdu, shape } = candidate;
  const { name, axis, medium } = axisOf(candidate, hdus, context);
  const bands = bandsOf(hdu, shape, hdus);
  const chosen = chooseBands(bands, corrections);
  const flux = read(chosen.flux);
  const fluxUnit = settleFluxUnit(chosen.flux.hdu.header.text('BUNIT') ?? '', 'BUNIT', corrections);
  if (bands.length > 1 && bands.every((band) => band.label === ''))
    warnings.push({
      code: 'rows_not_named',
      sentence: `The image in ${hdu.place} has ${bands.length} rows and does not say what they are; row 1 was taken as the flux, the others were not used.`,
    });
  return {
    format: 'fits_image',
    place: hdu.place,
    ...file,
    columnFacts: bandFacts(bands, chosen),
    uncorrectedColumns: uncorrectedBands(bands, corrections),
    header: headers.flatMap((header) => [...header.cards]),
    axisName: name,
    axis,
    medium: medium ?? mediumOfCards(headers),
    flux,
    fluxName: nameOf(chosen.flux),
    fluxUnit,
    fluxKind: fluxKindOf({ name: chosen.flux.label, unit: fluxUnit.value, ucd: '' }, fluxUnit.where, saysNormalised(headers)),
    uncertainty: chosen.uncertainty && {
      values: read(chosen.uncertainty),
      name: nameOf(chosen.uncertainty),
      kind: statedKind(chosen.kind, { how: 'stated', where: 'name of the row' }, corrections),
    },
    mask: chosen.mask && { values: read(chosen.mask), name: nameOf(chosen.mask) },
    orders: null,
    locate: (i) => ({ words: `pixel ${i + 1}`, row: i + 1 }),
    facts: readFacts(headers, warnings),
    warnings,
  };

  function read(band: Band): Float64Array {
    return readBand(band.hdu, band.shape, band.band, context);
  }
}

function axisOf({ hdu, shape }: ImageCandidate, hdus: readonly Hdu[], context: ReadContext): ImageAxis {
  const place = { hdu, k: shape.axis, length: shape.length };
  const ctype = (hdu.header.text(`CTYPE${shape.axis}`) ?? '').toUpperCase();
  if (ctype.endsWith('-TAB')) return lookUpAxis(place, hdus, context);
  if (hasAxis(hdu, shape)) return imageAxis(place, context);
  const wave = waveImage(hdu, shape, hdus)!;
  const name = wave.header.text('EXTNAME')!;
  const values = readBand(wave, { axis: 1, length: shape.length, bands: 1 }, 0, context);
  const axis = settleAxis(
    values,
    { name, quantity: axisQuantity(name) ?? 'length', unit: wave.header.text('BUNIT') ?? '', where: `BUNIT of ${wave.place}` },
    context,
  );
  return { name, axis, medium: null };
}

/** The rows of the image, or the images of the same length beside it. */
function bandsOf(hdu: Hdu, shape: ImageShape, hdus: readonly Hdu[]): Band[] {
  const rows = Array.from({ length: shape.bands }, (_, band): Band => ({ hdu, shape, band, label: rowLabel(hdu, band, shape.bands) }));
  if (shape.bands > 1) return rows;
  const beside = hdus.filter(
    (other) =>
      other !== hdu &&
      other.kind === 'image' &&
      sameLength(other, shape) &&
      isBeside(other.header.text('EXTNAME') ?? '') &&
      !axisQuantity(other.header.text('EXTNAME') ?? ''),
  );
  return [
    ...rows,
    ...beside.map((other): Band => ({
      hdu: other,
      shape: { axis: 1, length: shape.length, bands: 1 },
      band: 0,
      label: other.header.text('EXTNAME')!,
    })),
  ];
}

/** What a row holds, by the cards that reduction systems write for it. */
function rowLabel(hdu: Hdu, band: number, bands: number): string {
  if (bands === 1) return hdu.header.text('EXTNAME') ?? '';
  for (const keyword of [`ARRAY${band + 1}`, `BANDID${band + 1}`, `ROW${band + 1}`]) {
    const text = hdu.header.text(keyword);
    // 'sigma - background none, weights none': what comes after the dash is how it was made
    if (text !== null) return text.split(' - ')[0]!.trim();
  }
  const words = hdu.header.text('EXTEN0')?.split(/\s+/) ?? [];
  return words.length === bands ? words[band]! : '';
}

const nameOf = (band: Band): string => band.label || (band.shape.bands > 1 ? `row ${band.band + 1}` : 'image');

interface ChosenBands {
  readonly flux: Band;
  readonly uncertainty: Band | null;
  readonly kind: UncertaintyKind;
  readonly mask: Band | null;
}

/** The rows as columns that a person may choose from. */
function bandFacts(bands: readonly Band[], { flux, uncertainty, mask }: ChosenBands): ColumnFact[] {
  return bands.map((band) => ({
    ...{ name: nameOf(band), unit: band.hdu.header.text('BUNIT') ?? '', ucd: '', utype: '', numeric: true },
    role: band === flux ? 'flux' : band === uncertainty ? 'uncertainty' : band === mask ? 'mask' : null,
  }));
}

function uncorrectedBands(bands: readonly Band[], { fluxColumn, uncertaintyColumn, maskColumn }: ReadingCorrections): UncorrectedColumns {
  const own = chooseBands(bands, {});
  return {
    ...(fluxColumn === undefined ? {} : { fluxColumn: nameOf(own.flux) }),
    ...(uncertaintyColumn === undefined ? {} : { uncertaintyColumn: own.uncertainty && nameOf(own.uncertainty) }),
    ...(maskColumn === undefined ? {} : { maskColumn: own.mask && nameOf(own.mask) }),
  };
}

function chooseBands(bands: readonly Band[], corrections: ReadingCorrections): ChosenBands {
  const byName = (name: string) => {
    const band = bands.find((one) => nameOf(one) === name);
    if (!band) refuse('column_not_found', `There is no row "${quoted(name)}" in this image. Choose one of its rows.`, { column: name });
    return band;
  };
  const roles = bands.map((band) => nameRole(band.label));
  const withRole = (wanted: (role: string) => boolean) => bands.find((_, i) => roles[i] && wanted(roles[i].role)) ?? null;
  const flux = corrections.fluxColumn
    ? byName(corrections.fluxColumn)
    : (bands.find((_, i) => roles[i]?.role === 'flux' && roles[i].strength > 5) ?? bands[0]!);
  const found = withRole((role) => role === 'sigma' || role === 'variance' || role === 'inverse_variance');
  const uncertainty =
    corrections.uncertaintyColumn === null ? null : corrections.uncertaintyColumn ? byName(corrections.uncertaintyColumn) : found;
  const role = uncertainty && nameRole(uncertainty.label)?.role;
  const kind = role === 'variance' || role === 'inverse_variance' ? role : 'sigma';
  const mask =
    corrections.maskColumn === null ? null : corrections.maskColumn ? byName(corrections.maskColumn) : withRole((one) => one === 'mask');
  return { flux, uncertainty: uncertainty === flux ? null : uncertainty, kind, mask };
}
