import { centralDepth, isCommonInClouds } from '../atoms/index.js';
import type { Line, LineList } from '../linelist/index.js';
import type { ComparisonSettings, Side } from './comparison.js';
import { thinColumn } from './absorber.js';
import { fitGrowth, type GrowthFit, type MeasuredWidth, type SpeciesWidths } from './growth-fit.js';
import { gatherClouds, type CloudDraft, type Pair } from './gather.js';
import { imprintOf, type Imprint } from './imprint.js';
import { SEEN_AT } from './judge.js';
import { measureLine, type Measured } from './measure-lines.js';

export const SIDES = ['a', 'b'] as const;

/** Everything measured of the gas: clouds, lines, and each line in each cloud on each side. */
export interface Gas {
  readonly drafts: readonly CloudDraft[];
  readonly lines: readonly Line[];
  /** [line][cloud] */
  readonly measured: Record<Side, readonly (readonly (Measured | null)[])[]>;
  /** curve of growth of each cloud; null where nothing is seen */
  readonly growth: Record<Side, readonly (GrowthFit | null)[]>;
}

const TYPICAL_B = 2; // km/s
const THIN = 0.3;

/** Lines from the ground level that gas of clouds is known to show, within the coverage of either spectrum. */
export function gasLines(list: LineList, { a, b }: Pair): Line[] {
  const within = (nm: number) => [a, b].some(({ analysis }) => nm > analysis.fromNm && nm < analysis.toNm);
  return list.lines.filter(
    (l) =>
      l.settings.includes('interstellar') &&
      l.type !== 'band' &&
      isCommonInClouds(l.species) &&
      (l.oscillatorStrength ?? 0) > 0 &&
      within(l.wavelengthNm),
  );
}

/** Clouds measured in rounds: with thin profiles to find velocities, with the columns' profiles to get the widths right. */
export function measureGas(list: LineList, pair: Pair, settings: ComparisonSettings): Gas {
  const lines = gasLines(list, pair);
  let drafts = gatherClouds(pair, settings);
  const thin = (element: number) => (): Imprint => imprintOf(THIN, TYPICAL_B, element);
  const look = (shape: (side: Side) => (line: Line, cloud: number) => Imprint) =>
    each((side) => lines.map((line) => measureLine(pair[side], line, drafts, side, shape(side), true)));
  let measured = look((side) => thin(pair[side].elementV));
  drafts = centred(drafts, measured);
  let growth = grown(lines, drafts, measured);
  measured = look((side) => saturatedShape(growth[side], pair[side].elementV));
  drafts = centred(drafts, measured);
  growth = grown(lines, drafts, measured);
  return { drafts, lines, measured, growth };
}

const each = <T>(f: (side: Side) => T): Record<Side, T> => ({ a: f('a'), b: f('b') });

function saturatedShape(growth: readonly (GrowthFit | null)[], element: number) {
  return (line: Line, cloud: number): Imprint => {
    const fit = growth[cloud];
    const column = fit?.columns.find((c) => c.species === line.species);
    if (!fit || !column) return imprintOf(THIN, fit?.bKmPerS ?? TYPICAL_B, element);
    return imprintOf(centralDepth(10 ** column.logN, line.oscillatorStrength!, line.wavelengthNm, fit.bKmPerS), fit.bKmPerS, element);
  };
}

const CLEAN = 0.3;
const LABORATORY = 0.08; // km/s, scatter of listed wavelengths and of what neighbours do to a centre
const STEADY = 6; // sigma of a line before it moves a cloud

/** Moves each cloud to where its lines stand on the sides that show it. */
function centred(drafts: readonly CloudDraft[], measured: Gas['measured']): CloudDraft[] {
  return drafts.map((d, k) => {
    const at = each((side) => {
      const mine = d.found.includes(side) || d.found.length === 0;
      const votes = measured[side]
        .map((row) => row[k])
        .filter(
          (m): m is Measured => !!m && m.width > STEADY * m.error && Math.abs(m.foreign) < CLEAN * m.width && Number.isFinite(m.offset),
        )
        .filter((m) => Math.abs(m.offset) < 4);
      if (!mine || votes.length === 0) return d.at[side];
      const { value, sigma } = steadyMean(votes.map((m) => ({ x: m.offset, s: Math.hypot(m.offsetSigma, LABORATORY) })));
      return { velocity: d.at[side].velocity + value, sigma };
    });
    // on the side that did not find it the cloud is looked for where the other one has it
    const [only] = d.found;
    if (d.found.length === 1 && only) return { ...d, at: { a: at[only], b: at[only] } };
    return { ...d, at };
  });
}

/** Weighted mean with far values weighed down (Huber 1964), and its error widened by the scatter. */
function steadyMean(votes: readonly { x: number; s: number }[]): { value: number; sigma: number } {
  let value = [...votes].sort((p, q) => p.x - q.x)[votes.length >> 1]!.x;
  let sigma = 0;
  for (let round = 0; round < 4; round++) {
    let sum = 0;
    let weights = 0;
    let chi = 0;
    for (const { x, s } of votes) {
      const far = Math.abs(x - value) / (2 * s);
      const w = (far > 1 ? 1 / far : 1) / s ** 2;
      sum += w * x;
      weights += w;
      chi += w * (x - value) ** 2;
    }
    value = sum / weights;
    sigma = Math.sqrt(Math.max(1, chi / Math.max(1, votes.length - 1)) / weights);
  }
  return { value, sigma };
}

const MOST_FOREIGN = 0.5; // of a width: with more of it the width says too little to weigh a column
const GROUND = 1; // cm^-1: lines from excited levels have a column of their own

/** Curve of growth of each cloud on each side, from the lines seen in it and those that should be and are not. */
function grown(lines: readonly Line[], drafts: readonly CloudDraft[], measured: Gas['measured']): Gas['growth'] {
  return each((side) =>
    drafts.map((_, k) => {
      const species = speciesWidths(lines, measured[side], k);
      return species.length ? fitGrowth(species) : null;
    }),
  );
}

function speciesWidths(lines: readonly Line[], measured: Gas['measured'][Side], k: number): SpeciesWidths[] {
  const groups = new Map<string, MeasuredWidth[]>();
  const seen = new Set<string>();
  lines.forEach((line, i) => {
    const m = measured[i]![k];
    if (!m || (line.lowerEnergyPerCm ?? 0) > GROUND || Math.abs(m.foreign) > MOST_FOREIGN * Math.max(m.width, 4 * m.error)) return;
    if (m.width > SEEN_AT * m.error) seen.add(line.species);
    const entry = { ...transitionOf(line), widthNm: m.width, sigmaNm: m.error };
    const group = groups.get(line.species);
    if (group) group.push(entry);
    else groups.set(line.species, [entry]);
  });
  return [...groups].filter(([name]) => seen.has(name)).map(([species, all]) => ({ species, lines: telling(all) }));
}

/** Lines that bear on a column: seen, or absent where the strongest makes them expected. */
function telling(lines: readonly MeasuredWidth[]): MeasuredWidth[] {
  const least = Math.min(...lines.filter((l) => l.widthNm > SEEN_AT * l.sigmaNm).map((l) => thinColumn(l, l.widthNm)));
  return lines.filter((l) => l.widthNm > 2 * l.sigmaNm || thinColumn(l, 3 * l.sigmaNm) < least + 0.3);
}

export const transitionOf = (line: Line) => ({
  wavelengthNm: line.wavelengthNm,
  oscillatorStrength: line.oscillatorStrength!,
  gammaPerS: line.einsteinA ?? 1e8,
});
