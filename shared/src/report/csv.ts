/** What may stand in a cell: a number, already rounded, as its digits; or text. */
export type Cell = { readonly digits: string } | { readonly text: string };

export const digits = (text: string): Cell => ({ digits: text });
export const text = (value: string | null): Cell => ({ text: value ?? '' });

const NUMBER = /^-?\d+(\.\d+)?([eE][+-]?\d+)?$/;
/**
 * First characters that make a spreadsheet run a cell as a formula, in plain and in full-width form. Apostrophes before them count in, so
 * that a reader which takes one away gives back what was written.
 */
// eslint-disable-next-line no-control-regex
const FORMULA = /^'*[=+\-@\t\r\u0000＝＋－＠]/;
/** The semicolon and the tab too: some spreadsheets split at them. */
const NEEDS_QUOTES = /[",;\t\r\n]|^\s|\s$/;
const LINE_END = '\r\n';

/**
 * Writes comments and a table as CSV (RFC 4180). Text that a spreadsheet would run as a formula gets an apostrophe in front; numbers are
 * written as they are, minus signs included, and anything that is no number is refused as one.
 * @param comments lines before the table, each written after '# '
 * @throws RangeError when a cell of digits does not hold a number
 */
export function writeCsv(comments: readonly string[], names: readonly string[], rows: readonly (readonly Cell[])[]): string {
  const lines = [
    ...comments.map(commentLine),
    names.map((name) => field(text(name))).join(','),
    ...rows.map((row) => row.map(field).join(',')),
  ];
  return lines.map((line) => line + LINE_END).join('');
}

function field(cell: Cell): string {
  if ('text' in cell) return quoted(guarded(cell.text));
  if (cell.digits !== '' && !NUMBER.test(cell.digits)) throw new RangeError(`"${cell.digits}" is not a number`);
  return cell.digits;
}

const guarded = (value: string): string => (FORMULA.test(value) ? `'${value}` : value);
const quoted = (value: string): string => (NEEDS_QUOTES.test(value) ? `"${value.replaceAll('"', '""')}"` : value);

/** A spreadsheet splits a comment at separators like any line, so no piece of one may begin like a formula or a quoted cell. */
function commentLine(comment: string): string {
  // eslint-disable-next-line no-control-regex
  const oneLine = comment.replace(/[\u0000-\u001f\u007f\u2028\u2029]+/g, ' ').replaceAll('"', "'");
  return `# ${oneLine.replace(/([,;]\s*)(?=[=+\-@＝＋－＠])/g, "$1'")}`;
}
