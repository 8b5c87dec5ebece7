import { parseArgs } from 'node:util';
import type { ReadingCorrections } from '@foreveil/shared';
import { ANSWER_OPTIONS, ANSWER_USAGE, answersOf } from './answers.js';

export const USAGE = `usage: npm run --silent identify -- FILE... [--medium air|vacuum] [--frame barycentric|heliocentric|topocentric] [--resolution R]

Reads each spectrum, identifies its lines against the default line list and prints one JSON object a line to standard output.
The options overrule what the files say. Exit status: 0 all files used, 1 a file could not be used, 2 wrong arguments.
${ANSWER_USAGE}`;

export const COMPARE_USAGE = `usage: npm run --silent compare -- FILE_A FILE_B [--medium air|vacuum] [--frame barycentric|heliocentric|topocentric] [--resolution R]

Analyses two spectra and compares the gas before both: one JSON object on standard output. The options overrule what both files say.
Exit status: 0 compared, 1 a file could not be used, 2 wrong arguments.`;

export type Options =
  { readonly files: readonly string[]; readonly corrections: ReadingCorrections } | { readonly problem: string } | { readonly help: true };

const MEDIA = ['air', 'vacuum'] as const;
const FRAMES = ['barycentric', 'heliocentric', 'topocentric'] as const;

/** The command line, or what is wrong with it. */
export function readOptions(argv: readonly string[]): Options {
  let parsed;
  try {
    parsed = parseArgs({
      args: [...argv],
      allowPositionals: true,
      options: {
        medium: { type: 'string' },
        frame: { type: 'string' },
        resolution: { type: 'string' },
        ...ANSWER_OPTIONS,
        help: { type: 'boolean', short: 'h' },
      },
    });
  } catch (e) {
    return { problem: e instanceof Error ? e.message : String(e) };
  }
  const { values, positionals } = parsed;
  if (values.help) return { help: true };
  const medium = MEDIA.find((m) => m === values.medium);
  if (values.medium !== undefined && !medium) return { problem: `--medium takes air or vacuum, not "${values.medium}"` };
  const frame = FRAMES.find((f) => f === values.frame);
  if (values.frame !== undefined && !frame) return { problem: `--frame takes ${FRAMES.join(', ')}, not "${values.frame}"` };
  const resolvingPower = values.resolution === undefined ? undefined : Number(values.resolution);
  if (resolvingPower !== undefined && !(resolvingPower >= 10 && resolvingPower <= 1e7))
    return { problem: `--resolution takes lambda/FWHM between 10 and 10 000 000, not "${values.resolution}"` };
  const answered = answersOf(values);
  if ('problem' in answered) return answered;
  if (positionals.length === 0) return { problem: 'no file named' };
  return {
    files: positionals,
    corrections: { ...(medium && { medium }), ...(frame && { frame }), ...(resolvingPower && { resolvingPower }), ...answered.corrections },
  };
}
