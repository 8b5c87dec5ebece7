import type { ComparedLine, VelocityProfile } from '@foreveil/shared';
import { expect, test } from 'vitest';
import { figureText } from './export-figure.js';
import { stackOf, toggled } from './stack.js';
import { threadsOf, VEIL, veilScale, velocityTicks } from './veil-layout.js';
import { filtered } from './VerdictTable.js';
import { oddsOf, type JudgedLine } from './verdicts.js';

const measure = (velocityKmPerS: number | null, equivalentWidthNm = 0.01): NonNullable<ComparedLine['a']> => ({
  ...{ equivalentWidthNm, equivalentWidthSigmaNm: 0.001, limitNm: 0.002, velocityKmPerS, velocitySigmaKmPerS: 0.1 },
  ...{ elementKmPerS: 5, featureIndex: null, foreignNm: 0 },
});
const line = (more: Partial<JudgedLine> = {}): JudgedLine => ({
  ...{ key: 'k', lineId: 'NaI', species: 'Na I', restNm: 550, family: 'interstellar', cloud: 0, velocityKmPerS: 10 },
  ...{ verdict: 'shared', probability: 0.99, a: measure(10), b: measure(10), ratio: 1, ratioSigma: 0.1 },
  ...{ differenceKmPerS: 0, differenceSigmaKmPerS: 0.1, sentence: '', stands: 'shared', ruling: null },
  ...more,
});

test('the table is filtered by the verdict that stands, not by the computed one, and by family', () => {
  const overruled = line({ key: 'o', verdict: 'shared', stands: 'only-a' });
  const star = line({ key: 's', family: 'stellar' });
  const all = [line(), overruled, star];
  expect(filtered(all, { verdict: 'only-a', family: 'all' })).toEqual([overruled]);
  expect(filtered(all, { verdict: 'shared', family: 'interstellar' }).map((l) => l.key)).toEqual(['k']);
  expect(filtered(all, { verdict: 'all', family: 'all' })).toEqual(all);
});

const scale = veilScale(1000, [{ fromNm: 500, toNm: 600 }, { fromNm: 540, toNm: 700 }], [-30, 10]); // prettier-ignore

test('the veil spans both spectra and has zero velocity in its middle', () => {
  expect([scale.fromNm, scale.toNm]).toEqual([500, 700]);
  expect([scale.x(500), scale.x(700)]).toEqual([scale.left, scale.right]);
  expect(scale.vx(0)).toBeCloseTo((scale.left + scale.right) / 2, 9);
  expect(scale.velocityTo).toBeGreaterThan(30);
  const ticks = velocityTicks(scale);
  expect([ticks[0], ticks.at(-1)]).toEqual([scale.velocityFrom, scale.velocityTo]);
  expect(ticks).toContain(0);
});

test('threads run from their line’s light in each strip to their own velocity, and meet where velocities do', () => {
  const threads = threadsOf([line({ a: measure(10), b: measure(14) })], scale);
  expect(threads.map((t) => t.side)).toEqual(['a', 'b']);
  const ends = threads.map(({ path }) => path.match(/-?[\d.]+/g)!.map(Number));
  for (const [i, v] of [10, 14].entries()) {
    expect(ends[i]![0]).toBeCloseTo(scale.x(550), 1);
    expect(ends[i]!.at(-2)).toBeCloseTo(scale.vx(v), 1);
    expect(ends[i]!.at(-1)).toBe(VEIL.middle);
  }
  expect(ends.map((e) => e[1])).toEqual([VEIL.stripTopA + VEIL.stripHeight, VEIL.stripTopB]);
});

test('no thread is drawn for what is not seen, lies off the axis, or belongs to a star', () => {
  expect(threadsOf([line({ a: measure(10, 0.002), b: null })], scale)).toEqual([]);
  expect(threadsOf([line({ a: measure(900), b: null })], scale)).toEqual([]);
  expect(threadsOf([line({ family: 'stellar' })], scale)).toEqual([]);
});

test('odds are those of the verdict against all others', () => {
  expect([oddsOf(0.75), oddsOf(0.99), oddsOf(0.99999)]).toEqual(['3.0', '99', '> 1000']);
});

test('lines go into the stack and out of it, and stand by wavelength; no choice is all of them', () => {
  const profile = (lineId: string, restNm: number) => ({ lineId, restNm }) as VelocityProfile;
  const profiles = [profile('b', 589), profile('a', 393), profile('c', 769)];
  const chosen = toggled(toggled(toggled(new Set(), 'b'), 'a'), 'c');
  expect(stackOf(profiles, toggled(chosen, 'c')).map((p) => p.lineId)).toEqual(['a', 'b']);
  expect(stackOf(profiles, new Set())).toBe(profiles);
});

test('the figure leaves as a drawing of its own, in day colours on their ground, and with nothing that runs', () => {
  const host = document.createElement('div');
  host.innerHTML =
    '<svg xmlns="http://www.w3.org/2000/svg" width="10" height="10"><path stroke="var(--interstellar)" d="M0 0"/><text fill="var(--nobody)">&lt;script&gt;</text></svg>';
  const svg = host.querySelector('svg')!;
  svg.addEventListener('click', () => undefined);
  const text = figureText(svg);
  const read = new DOMParser().parseFromString(text, 'image/svg+xml');
  expect(read.querySelector('parsererror')).toBeNull();
  expect(read.documentElement.firstElementChild!.getAttribute('fill')).toBe('#fbfaf7');
  expect(read.querySelector('path')!.getAttribute('stroke')).toBe('#0072b2');
  expect(text).not.toContain('var(--');
  expect(read.querySelector('script')).toBeNull();
  expect([...read.querySelectorAll('*')].flatMap((e) => e.getAttributeNames()).filter((n) => n.startsWith('on'))).toEqual([]);
});
