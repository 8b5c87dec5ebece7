import { centralDepth } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import { apparentColumn, tabledWidth, thinColumn } from './absorber.js';
import type { Column, Side, SpeciesColumns } from './comparison.js';
import { SIDES, transitionOf, type Gas } from './clouds.js';
import type { Pair } from './gather.js';
import type { GrowthFit } from './growth-fit.js';
import { SEEN_AT } from './judge.js';
import { sampleAt, type Light } from './light.js';
import type { Measured } from './measure-lines.js';

const UNTOLD = 0.08; // dex: a deep line whose column is known better than this is told by its damping wings or a fainter partner
const TOO_DEEP = 2; // optical depth of the weakest line that is used
const SAME = 0.03; // dex: within this the apparent column needs no correction
const UNFIT = 0.15; // dex between apparent columns of two lines of one species that tells of hidden saturation
const TYPICAL_B = 2;

/** Columns of every species seen on either side of a cloud, limits where one side does not show it. */
export function columnsOf(gas: Gas, pair: Pair, k: number): SpeciesColumns[] {
  const ground = gas.lines.map((line, i) => ({ line, i })).filter(({ line }) => (line.lowerEnergyPerCm ?? 0) <= 1);
  const species = [...new Set(ground.filter(({ i }) => SIDES.some((s) => seen(gas.measured[s][i]![k]))).map(({ line }) => line.species))];
  return species.map((name) => {
    const lines = ground.filter(({ line }) => line.species === name);
    const of = (side: Side) =>
      columnOf(
        name,
        lines.flatMap(({ line, i }) => {
          const m = gas.measured[side][i]![k];
          return m ? [{ line, m }] : [];
        }),
        gas.growth[side][k] ?? null,
        pair[side],
        gas.drafts[k]!.at[side].velocity,
      );
    const [a, b] = [of('a'), of('b')];
    const stand = a?.logNSigma != null && b?.logNSigma != null && !a.saturated && !b.saturated;
    return {
      species: name,
      a,
      b,
      difference: stand ? b.logN - a.logN : null,
      differenceSigma: stand ? Math.hypot(a.logNSigma!, b.logNSigma!) : null,
    };
  });
}

interface SeenLine {
  readonly line: Line;
  readonly m: Measured;
}
const seen = (m: Measured | null | undefined): boolean => !!m && m.width > SEEN_AT * m.error;

function columnOf(species: string, lines: readonly SeenLine[], growth: GrowthFit | null, light: Light, velocity: number): Column | null {
  if (lines.length === 0) return null;
  const shown = lines.filter(({ m }) => seen(m));
  const belief = growth?.columns.find((c) => c.species === species);
  if (!belief || shown.length === 0) return limitOf(lines, growth?.bKmPerS ?? TYPICAL_B);
  const b = growth!.bKmPerS;
  const weakest = Math.min(...shown.map(({ line }) => centralDepth(10 ** belief.logN, line.oscillatorStrength!, line.wavelengthNm, b)));
  const saturated = weakest > TOO_DEEP && belief.logNSigma > UNTOLD;
  const apparent = shown.map((s) => apparentOf(s, light, velocity));
  const strongest = apparent[shown.indexOf(strongestOf(shown))]!;
  const names = shown.map(({ line }) => `${line.species} ${line.wavelengthNm.toFixed(2)}`);
  const asItIs = Math.abs(strongest - belief.logN) < SAME;
  return {
    method: asItIs ? 'apparent-depth' : 'curve-of-growth',
    logN: saturated ? belief.low : belief.logN,
    logNSigma: saturated ? null : belief.logNSigma,
    apparentLogN: Number.isFinite(strongest) ? strongest : null,
    saturated,
    lines: names,
    sentence: sentenceOf(saturated, shown, apparent, b, light),
  };
}

const strength = ({ line }: SeenLine) => line.oscillatorStrength! * line.wavelengthNm;
const strongestOf = (lines: readonly SeenLine[]) => lines.reduce((best, l) => (strength(l) > strength(best) ? l : best));

function sentenceOf(saturated: boolean, shown: readonly SeenLine[], apparent: readonly number[], b: number, light: Light): string {
  const deep = shown.length > 1 ? 'even the weakest line seen is saturated' : 'its one line is saturated or too narrow for the instrument';
  if (saturated) return `A lower limit: ${deep} at a resolution of ${light.elementV.toFixed(1)} km/s.`;
  const finite = apparent.filter(Number.isFinite);
  const spread = Math.max(...finite) - Math.min(...finite);
  if (finite.length > 1 && spread > UNFIT)
    return `Apparent columns of its lines differ by ${spread.toFixed(2)} dex: saturation that the instrument hides, corrected with b = ${b.toFixed(1)} km/s.`;
  return '';
}

/** 2 sigma upper limit from the line that bears most. */
function limitOf(lines: readonly SeenLine[], b: number): Column {
  const limits = lines.map(({ line, m }) => ({ line, logN: inverted(line, Math.max(0, m.width) + 2 * m.error, b) }));
  const best = limits.reduce((p, q) => (q.logN < p.logN ? q : p));
  return {
    method: 'limit',
    logN: best.logN,
    logNSigma: null,
    apparentLogN: null,
    saturated: false,
    lines: [`${best.line.species} ${best.line.wavelengthNm.toFixed(2)}`],
    sentence: '',
  };
}

/** Column at which a line reaches a width, at a Doppler parameter. */
function inverted(line: Line, widthNm: number, b: number): number {
  const t = transitionOf(line);
  let low = thinColumn(t, widthNm) - 0.1;
  let high = low + 6;
  for (let i = 0; i < 30; i++) {
    const mid = 0.5 * (low + high);
    if (tabledWidth(t, 10 ** mid, b) < widthNm) low = mid;
    else high = mid;
  }
  return 0.5 * (low + high);
}

const REACH = 1.3; // FWHM on each side of a line that its apparent column is summed over

/** log10 of the apparent column over the line's own profile, foreign light left out by the measured width's ratio. */
function apparentOf({ line, m }: SeenLine, light: Light, velocity: number): number {
  const half = REACH * Math.hypot(light.elementV, 4);
  const from = sampleAt(light, light.wavelengthOf(line.wavelengthNm, velocity - half));
  const to = sampleAt(light, light.wavelengthOf(line.wavelengthNm, velocity + half));
  const { wavelength, flux, weight } = light.data;
  const v: number[] = [];
  const f: number[] = [];
  const s: number[] = [];
  for (let i = from; i < to; i++) {
    if (!(weight[i]! > 0)) continue;
    v.push(light.velocityOf(wavelength[i]!, line.wavelengthNm));
    f.push(flux[i]!);
    s.push(1 / Math.sqrt(weight[i]!));
  }
  if (v.length < 3) return NaN;
  const floor = Math.max(1e-3, 0.5 * (s[s.length >> 1] ?? 1e-3));
  const direct = apparentColumn(transitionOf(line), v, f, s, floor);
  const width = v.reduce((sum, x, i) => sum + (1 - f[i]!) * 0.5 * (v[Math.min(v.length - 1, i + 1)]! - v[Math.max(0, i - 1)]!), 0);
  const mine = m.width / ((width * line.wavelengthNm) / 299_792.458);
  // where the light around is not this line's own, the sum is not either: it is scaled to the measured width
  return direct.column > 0 && width > 0 ? Math.log10(direct.column * mine) : NaN;
}
