import { contentDisposition } from '../../common/http/content-disposition.js';
import { labelFrom, storedFileName } from './file-name.js';

const names: [delivered: string, stored: string][] = [
  ['star.fits', 'star.fits'],
  ['../../etc/passwd', 'passwd'],
  ['C:\\data\\star.csv', 'star.csv'],
  ['/', 'spectrum'],
  ['', 'spectrum'],
  ['\0', 'spectrum'],
  ['a\0b.csv', 'ab.csv'],
  ['a\r\nSet-Cookie: x.csv', 'a Set-Cookie: x.csv'.replace(' ', '  ')],
  ['CON', 'CON'],
  ['..', '..'],
  ['  spaced .csv ', 'spaced .csv'],
  ['gnp.\u202eexe', 'gnp.exe'],
  ['cafe\u0301.csv', 'café.csv'],
  ['\ud83dlone.csv', 'lone.csv'],
  ['星😀.csv', '星😀.csv'],
  ['x'.repeat(300), 'x'.repeat(255)],
];

test.each(names)('stores %j as %j', (delivered, stored) => {
  expect(storedFileName(delivered)).toBe(stored);
});

test.each(names)('sends %j as one header line that names a file and nothing else', (delivered, stored) => {
  const header = contentDisposition(storedFileName(delivered));
  const [, exact] = /^attachment; filename="[\x20-\x21\x23-\x5b\x5d-\x7e]*"; filename\*=UTF-8''([\w%.!~-]*)$/.exec(header)!;
  expect(decodeURIComponent(exact!)).toBe(stored);
});

test('counts a name of 255 characters, not of 255 halves of them', () => {
  expect([...storedFileName('😀'.repeat(300))]).toHaveLength(255);
});

test.each([
  ['tern-1.fits.gz', 'tern-1'],
  ['survey.csv', 'survey'],
  ['HD.2025.12.fits', 'HD.2025'],
  ['noending', 'noending'],
  ['.csv', 'spectrum'],
])('calls the spectrum of %s %s', (fileName, label) => {
  expect(labelFrom(fileName)).toBe(label);
});
