/** A value of a card: null when the card has none; a complex or malformed value stays text. */
export type CardValue = string | number | boolean | null;

const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[EDed][+-]?\d+)?$/;

/** Value of the text after '= ', FITS Standard 4.0 section 4.2; exponents may be written with D. */
export function parseValue(text: string): CardValue {
  const quotedText = stringOf(text);
  if (quotedText !== null) return quotedText;
  const slash = text.indexOf('/');
  const plain = (slash < 0 ? text : text.slice(0, slash)).trim();
  if (plain === '') return null;
  if (plain === 'T') return true;
  if (plain === 'F') return false;
  return NUMBER.test(plain) ? Number(plain.replace(/[Dd]/, 'e')) : plain;
}

/** Content of a quoted string, '' standing for a quote, trailing blanks taken off; null when there is no opening quote. */
export function stringOf(text: string): string | null {
  const open = text.search(/\S/);
  if (open < 0 || text[open] !== "'") return null;
  let out = '';
  for (let i = open + 1; i < text.length; i++) {
    if (text[i] !== "'") out += text[i];
    else if (text[i + 1] === "'") {
      out += "'";
      i++;
    } else break;
  }
  return out.trimEnd();
}
