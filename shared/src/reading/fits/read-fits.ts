import type { ReadContext } from '../context.js';
import type { RawSpectrum } from '../raw.js';
import { quoted, Refusal, refuse } from '../refusal.js';
import type { ReadProblem, ReadWarning } from '../types.js';
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
  const { bytes, corrections, warnings } = context;
  const { hdus, problem } = readHdus(context);
  const wanted = corrections.place === undefined ? null : parsePlace(corrections.place, hdus);
  const { candidates, problems } = look(wanted ? [wanted.hdu] : hdus, hdus, wanted?.row ?? null, context);
  const best = candidates.find((candidate) => candidate.kind === 'table') ?? candidates[0];
  if (!best) {
    if (problem) throw new Refusal(problem);
    throw new Refusal(mostTelling(problems));
  }
  if (problem)
    warnings.push({
      code: 'file_damaged',
      sentence: `The spectrum was read, but a later part of the file is damaged. ${problem.sentence}`,
    });
  const { hdu } = best.of;
  const headers = hdu.index === 0 ? [hdu.header] : [hdu.header, hdus[0]!.header];
  noteHeader(headers, warnings);
  for (const one of hdu.index === 0 ? [hdu] : [hdus[0]!, hdu]) verifyChecksums(bytes, one, warnings);
  const others = wanted ? look(hdus, hdus, null, { ...context, corrections: {} }).candidates : candidates;
  const otherPlaces = others.flatMap((other) => placesOf(other)).filter((place) => place !== corrections.place && place !== hdu.place);
  if (best.kind === 'table') return rawFromTable(best.of, headers, [...new Set([...best.of.places, ...otherPlaces])], context);
  return rawFromImage(best.of, hdus, headers, otherPlaces, context);
}

const placesOf = (candidate: Candidate): string[] => [candidate.of.hdu.place, ...(candidate.kind === 'table' ? candidate.of.places : [])];

/** 'HDU 1 SPECTRUM row 2' as the unit and the row, from 0. */
function parsePlace(place: string, hdus: readonly Hdu[]): { hdu: Hdu; row: number | null } {
  const row = / row (\d{1,9})$/.exec(place);
  const name = row ? place.slice(0, row.index) : place;
  const hdu = hdus.find((one) => one.place === name);
  if (!hdu) refuse('place_not_found', `There is no part "${quoted(place)}" in this file. Choose one of its parts.`);
  return { hdu, row: row ? Number(row[1]) - 1 : null };
}

function look(among: readonly Hdu[], hdus: readonly Hdu[], row: number | null, context: ReadContext) {
  const candidates: Candidate[] = [];
  const problems: ReadProblem[] = [];
  for (const hdu of among) {
    try {
      const candidate = candidateOf(hdu, hdus, row, context);
      if (candidate) candidates.push(candidate);
    } catch (error) {
      if (!(error instanceof Refusal)) throw error;
      problems.push(error.problem);
    }
  }
  return { candidates, problems };
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
