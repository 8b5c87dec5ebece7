import { tidy } from '../../../common/http/tidy.js';
import type { Letter } from './letter.js';

export interface Rendered {
  readonly subject: string;
  readonly text: string;
  readonly html: string;
}

const LONGEST_SUBJECT = 140;

/** A line of a header: no control character, so nothing that a person typed can begin another header. */
export function headerLine(text: string): string {
  const line = tidy(text).replace(/\s+/g, ' ');
  return line.length > LONGEST_SUBJECT ? `${line.slice(0, LONGEST_SUBJECT - 1)}…` : line;
}

const ENTITIES: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };
const escape = (text: string): string => tidy(text).replace(/[&<>"']/g, (c) => ENTITIES[c]!);
const lines = (text: string): string => escape(text).replaceAll('\n', '<br>');

/** @param stop the address that turns off this kind of mail, where there is one */
export function render(letter: Letter, stop: string | null): Rendered {
  return { subject: headerLine(letter.subject), text: asText(letter, stop), html: asHtml(letter, stop) };
}

function asText({ paragraphs, quote, link, small }: Letter, stop: string | null): string {
  const quoted = quote ? [tidy(quote).replace(/^/gm, '> ')] : [];
  const foot = [...small, ...(stop ? [`Turn off mail of this kind: ${stop}`] : [])];
  return (
    [...paragraphs.map(tidy), ...quoted, ...(link ? [`${link.label}:\n${link.address}`] : []), ['--', ...foot.map(tidy)].join('\n')].join(
      '\n\n',
    ) + '\n'
  );
}

const FONT = "font-family:Inter,'Helvetica Neue',Arial,sans-serif;font-size:14px;line-height:1.5;color:#1c1c1e";

function asHtml({ subject, paragraphs, quote, link, small }: Letter, stop: string | null): string {
  const part = (html: string, style = '') => `<p style="margin:0 0 12px;${style}">${html}</p>`;
  const anchor = (address: string, label: string) => `<a href="${escape(address)}" style="color:#1c1c1e">${escape(label)}</a>`;
  return [
    `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>${escape(headerLine(subject))}</title></head>`,
    `<body style="margin:24px;max-width:560px;${FONT}">`,
    ...paragraphs.map((text) => part(lines(text))),
    ...(quote ? [`<blockquote style="margin:0 0 12px;padding-left:12px;border-left:2px solid #8a8a8e">${lines(quote)}</blockquote>`] : []),
    ...(link ? [part(anchor(link.address, link.label), 'font-weight:600')] : []),
    part(
      [...small.map(escape), ...(stop ? [anchor(stop, 'Turn off mail of this kind')] : [])].join('<br>'),
      'color:#5b5b60;font-size:12px',
    ),
    '</body></html>',
  ].join('\n');
}
