import type { ReadContext } from '../context.js';
import type { RawSpectrum } from '../raw.js';
import { quoted, Refusal, refuse } from '../refusal.js';
import { columnFacts } from '../columns/choose.js';
import type { PlaceFact, ReadProblem, ReadWarning } from '../types.js';
import { asciiTable } from './ascii-table.js';
import { binaryTable } from './binary-table.js';
import { verifyChecksums } from './checksum.js';
import { readHdus, type Hdu } from './hdu.js';
import type { Header } from './header.js';
import { imageCandidate, rawFromImage, type ImageCandidate } from './spectrum-image.js';
import { rawFromTable, tableCandidate, type TableCandidate } from './spectrum-table.js';

type Candidate = { readonly kind: 'table'; readonly of: TableCandidate } | { readonly kind: 'image'; readonly of: ImageCandidate };

/** The best spectrum of a FITS file, or the one at the place that was asked for. */
export function readFits(context: ReadContext): RawSpectrum {
  const { corrections } = context;
  const { hdus, problem } = readHdus(context);
  const wanted = corrections.place === undefined ? null : parsePlace(corrections.place, hdus, context);
  const looks = look(wanted ? [wanted.hdu] : hdus, hdus, wanted?.row ?? null, context);
  const places = wanted ? allPlaces(hdus, context) : looks.flatMap(({ hdu, found }) => placesOf(hdu, found));
  const candidates = looks.flatMap(({ found }) => ('kind' in found ? [found] : []));
  const best = candidates.find((candidate) => candidate.kind === 'table') ?? candidates[0];
  if (!best) {
    const problems = looks.flatMap(({ found }) => ('kind' in found ? [] : [found]));
    throw new Refusal({ ...(problem ?? mostTelling(problems)), places });
  }
  if (problem)
    context.warnings.push({
      code: 'file_damaged',
      sentence: `The spectrum was read, but a later part of the file is damaged. ${problem.sentence}`,
    });
  return rawFrom(best, hdus, places, context);
}

/** Every part of the file as it shows without corrections. */
const allPlaces = (hdus: readonly Hdu[], context: ReadContext): PlaceFact[] =>
  look(hdus, hdus, null, { ...context, corrections: {}, warnings: [] }).flatMap(({ hdu, found }) => placesOf(hdu, found));

function rawFrom(best: Candidate, hdus: readonly Hdu[], places: readonly PlaceFact[], context: ReadContext): RawSpectrum {
  const { hdu } = best.of;
  const headers = hdu.index === 0 ? [hdu.header] : [hdu.header, hdus[0]!.header];
  noteHeader(headers, context.warnings);
  noteStart(hdus[0]!, hdu, context.warnings);
  const own = hdu.index === 0 ? [hdu] : [hdus[0]!, hdu];
  const checksums = own.map((one) => verifyChecksums(context.bytes, one, context.warnings));
  try {
    if (best.kind === 'table') return rawFromTable(best.of, headers, { places, checksums }, context);
    return rawFromImage(best.of, hdus, headers, { places, checksums }, context);
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    const columns = best.kind === 'table' ? columnFacts(best.of.table.infos, best.of.choice) : [];
    throw new Refusal({ columnFacts: columns, places, ...error.problem });
  }
}

/** The parts of a unit that may be chosen, or the unit with the reason why it is no spectrum. */
function placesOf(hdu: Hdu, found: Candidate | ReadProblem): readonly PlaceFact[] {
  if ('kind' in found && found.kind === 'table') return found.of.places;
  const rows = 'kind' in found ? found.of.shape.length : null;
  const why = 'kind' in found ? '' : found.sentence;
  return [{ place: hdu.place, name: hdu.header.text('EXTNAME') ?? '', kind: hdu.kind, rows, isSpectrum: 'kind' in found, why }];
}

/** 'HDU 1 SPECTRUM row 2' as the unit and the row, from 0. */
function parsePlace(place: string, hdus: readonly Hdu[], context: ReadContext): { hdu: Hdu; row: number | null } {
  const row = / row (\d{1,9})$/.exec(place);
  const name = row ? place.slice(0, row.index) : place;
  const hdu = hdus.find((one) => one.place === name);
  if (!hdu)
    refuse('place_not_found', `There is no part "${quoted(place)}" in this file. Choose one of its parts.`, {
      places: allPlaces(hdus, context),
    });
  return { hdu, row: row ? Number(row[1]) - 1 : null };
}

interface Look {
  readonly hdu: Hdu;
  readonly found: Candidate | ReadProblem;
}

const NO_DATA_UNIT: ReadProblem = { code: 'no_spectrum', sentence: 'This unit is neither an image nor a table.' };

function look(among: readonly Hdu[], hdus: readonly Hdu[], row: number | null, context: ReadContext): Look[] {
  return among.map((hdu) => {
    try {
      return { hdu, found: candidateOf(hdu, hdus, row, context) ?? NO_DATA_UNIT };
    } catch (error) {
      if (!(error instanceof Refusal)) throw error;
      return { hdu, found: error.problem };
    }
  });
}

function candidateOf(hdu: Hdu, hdus: readonly Hdu[], row: number | null, context: ReadContext): Candidate | null {
  if (hdu.kind === 'binary_table') {
    if (hdu.header.get('ZTABLE') === true || hdu.header.get('ZIMAGE') === true)
      refuse(
        'compressed_fits',
        `${hdu.place} is a compressed table or image (ZTABLE, ZIMAGE), which is not supported. Uncompress the file first.`,
        { card: 'ZTABLE' },
      );
    return { kind: 'table', of: tableCandidate(hdu, binaryTable(hdu, context), row, context.corrections) };
  }
  if (hdu.kind === 'ascii_table') return { kind: 'table', of: tableCandidate(hdu, asciiTable(hdu, context), row, context.corrections) };
  return hdu.kind === 'image' ? { kind: 'image', of: imageCandidate(hdu, hdus) } : null;
}

/** Of several reasons the one that is about the spectrum: an empty primary unit is there in most files. */
function mostTelling(problems: readonly ReadProblem[]): ReadProblem {
  const telling =
    problems.find((problem) => problem.code !== 'no_data' && problem.code !== 'no_spectrum') ??
    problems.find((problem) => problem.code === 'no_spectrum');
  return (
    telling ??
    problems.find((problem) => problem.card !== undefined) ?? {
      code: 'no_spectrum',
      sentence: 'There is no spectrum in this file: it has no table and no image with data.',
    }
  );
}

function noteHeader(headers: readonly Header[], warnings: ReadWarning[]) {
  const duplicates = [...new Set(headers.flatMap((header) => header.duplicates))];
  if (duplicates.length > 0)
    warnings.push({
      code: 'duplicate_cards',
      sentence: `The header holds some keywords more than once (${quoted(duplicates.slice(0, 5).join(', '), 80)}); the last value of each was taken.`,
    });
  const illegal = headers.flatMap((header) => header.illegal);
  if (illegal.length > 0)
    warnings.push({
      code: 'illegal_cards',
      sentence: `The header holds ${illegal.length} cards that the FITS Standard does not allow (first: ${quoted(illegal[0]!, 10)}); they were ignored.`,
    });
}

/** First cards in the order that the standard demands, sections 4.4.1 and 7.3.1. */
const START: Record<Hdu['kind'], string> = {
  image: 'XTENSION BITPIX NAXIS',
  binary_table: 'XTENSION BITPIX NAXIS NAXIS1 NAXIS2 PCOUNT GCOUNT TFIELDS',
  ascii_table: 'XTENSION BITPIX NAXIS NAXIS1 NAXIS2 PCOUNT GCOUNT TFIELDS',
  other: 'XTENSION',
};

/** A file that says it is not standard, or mandatory cards in another order, can be read all the same, but is told of. */
function noteStart(primary: Hdu, hdu: Hdu, warnings: ReadWarning[]) {
  if (primary.header.get('SIMPLE') === false)
    warnings.push({
      code: 'not_standard',
      sentence: 'SIMPLE = F: the file says of itself that it does not follow the FITS Standard. Check what was read.',
    });
  const wanted = hdu.index === 0 ? START.image.replace('XTENSION', 'SIMPLE') : START[hdu.kind];
  const names = hdu.header.cards.slice(0, wanted.split(' ').length).map((card) => card.slice(0, 8).trim());
  if (names.join(' ') !== wanted)
    warnings.push({
      code: 'card_order',
      sentence: `The mandatory cards of ${hdu.place} are not in the order of the FITS Standard (${wanted}). They were found by name.`,
    });
}
