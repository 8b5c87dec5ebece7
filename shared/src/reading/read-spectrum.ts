import { withAnswers } from './answers.js';
import { assemble } from './assemble.js';
import type { ReadContext } from './context.js';
import { readFits } from './fits/read-fits.js';
import { gunzip } from './gunzip.js';
import { DEFAULT_READ_LIMITS, type ReadLimits } from './limits.js';
import type { RawSpectrum } from './raw.js';
import { recognise } from './recognise.js';
import { Refusal, refuse } from './refusal.js';
import { readHeader } from './fits/header.js';
import { readText } from './text/read-text.js';
import type { ReadingCorrections, ReadResult } from './types.js';

/**
 * Reads a spectrum from the bytes of a file: FITS tables and images, text tables, each packed with gzip or not. What the file
 * is, its content decides, not its name; the name only makes a refusal clearer.
 * Never throws for what a file holds: a file that cannot be used gives a problem.
 */
export function readSpectrum(
  bytes: Uint8Array,
  fileName: string,
  corrections: ReadingCorrections = {},
  limits: ReadLimits = DEFAULT_READ_LIMITS,
): ReadResult {
  try {
    return assembled(readRaw(bytes, fileName, corrections, limits), corrections);
  } catch (error) {
    if (error instanceof Refusal) return { ok: false, problem: withAnswers(error.problem) };
    // a fault of the reader must not take the caller down with it; the code tells it from a fault of the file
    return {
      ok: false,
      problem: {
        code: 'reader_fault',
        sentence: `The file could not be read: ${String(error)}. This is a fault of the program; please report it.`,
      },
    };
  }
}

/** What is refused after the columns were found says which columns there are to choose from. */
function assembled(raw: RawSpectrum, corrections: ReadingCorrections): ReadResult {
  try {
    return assemble(raw, corrections);
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    throw new Refusal({ columnFacts: raw.columnFacts, places: raw.places, ...error.problem });
  }
}

/** The columns as they stand in the file, before they are sorted, merged and converted. Throws `Refusal`. */
export function readRaw(
  bytes: Uint8Array,
  fileName: string,
  corrections: ReadingCorrections = {},
  limits: ReadLimits = DEFAULT_READ_LIMITS,
): RawSpectrum {
  const content = recognise(bytes);
  if (content !== 'gzip') return readPlain(bytes, fileName, corrections, limits);
  const unpacked = gunzip(bytes, limits, (beginning) => checkHeader(beginning, limits));
  if (recognise(unpacked) === 'gzip')
    refuse('nested_gzip', 'The gzip file holds another gzip file (nested); only a spectrum packed once is accepted.');
  return readPlain(unpacked, fileName, corrections, limits);
}

/** When something too large calls itself FITS, an endless header is the better reason. */
function checkHeader(beginning: Uint8Array, limits: ReadLimits) {
  if (recognise(beginning) === 'fits') readHeader(beginning, 0, 'HDU 0', limits);
}

const FITS_NAME = /\.(?:fits?|fts)(?:\.gz)?$/i;

function readPlain(bytes: Uint8Array, fileName: string, corrections: ReadingCorrections, limits: ReadLimits): RawSpectrum {
  const content = recognise(bytes);
  const context: ReadContext = { bytes, corrections, limits, warnings: [] };
  if (content === 'fits') return readFits(context);
  if (content === 'text' || content === 'utf16') return readText(context);
  if (content === 'empty') refuse('empty', 'The file is empty: it has no bytes.');
  if (content === 'nearly_fits')
    refuse('not_fits', 'This looks like FITS but is not a FITS file: its first card is not SIMPLE.', { card: 'SIMPLE' });
  if (content === 'binary' || content === 'gzip')
    refuse(
      'not_recognised',
      `The file is not recognised: it is not a FITS file (no SIMPLE card at its start) and not a text table${FITS_NAME.test(fileName) ? ', although its name says FITS' : ''}.`,
    );
  refuse('foreign_format', `This is ${content.foreign}, not a FITS file or a text table of numbers. Export the spectrum as FITS or text.`);
}
