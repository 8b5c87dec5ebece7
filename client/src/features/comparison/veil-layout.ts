import type { JudgedLine } from './verdicts.js';

export const VEIL = { height: 318, stripTopA: 24, stripHeight: 28, stripTopB: 256, middle: 154 } as const;

export interface VeilScale {
  readonly width: number;
  readonly left: number;
  readonly right: number;
  x(nm: number): number;
  vx(velocityKmPerS: number): number;
  readonly velocityFrom: number;
  readonly velocityTo: number;
  readonly fromNm: number;
  readonly toNm: number;
}

/** One wavelength scale for both strips, one velocity scale through the middle. */
export function veilScale(width: number, ranges: readonly { fromNm: number; toNm: number }[], velocities: readonly number[]): VeilScale {
  const gutter = width < 700 ? 8 : 112;
  const [left, right] = [gutter, width - 12];
  const fromNm = Math.min(...ranges.map((r) => r.fromNm));
  const toNm = Math.max(...ranges.map((r) => r.toNm));
  const reach = Math.max(20, ...velocities.map(Math.abs)) * 1.35;
  const step = reach > 150 ? 100 : reach > 60 ? 20 : 10;
  const edge = Math.ceil(reach / step) * step;
  return {
    width,
    left,
    right,
    fromNm,
    toNm,
    velocityFrom: -edge,
    velocityTo: edge,
    x: (nm) => left + ((nm - fromNm) / (toNm - fromNm)) * (right - left),
    vx: (v) => left + ((v + edge) / (2 * edge)) * (right - left),
  };
}

export interface Thread {
  readonly key: string;
  readonly path: string;
  readonly line: JudgedLine;
  readonly side: 'a' | 'b';
  readonly width: number;
}

/** Threads from the light of each line to its measured velocity; stellar lines have stubs instead. */
export function threadsOf(lines: readonly JudgedLine[], scale: VeilScale): Thread[] {
  const { middle, stripTopA, stripHeight, stripTopB } = VEIL;
  const starts = { a: stripTopA + stripHeight, b: stripTopB };
  return lines
    .filter((l) => l.family === 'interstellar' || l.family === 'telluric')
    .flatMap((line) =>
      (['a', 'b'] as const).flatMap((side) => {
        const m = line[side];
        if (!m || m.equivalentWidthNm < 3 * m.equivalentWidthSigmaNm) return [];
        const v = line.species === 'DIB' ? line.velocityKmPerS : (m.velocityKmPerS ?? line.velocityKmPerS);
        if (v < scale.velocityFrom || v > scale.velocityTo) return [];
        const [x, vx, y] = [scale.x(line.restNm), scale.vx(v), starts[side]];
        const h = middle - y;
        const path = `M${x.toFixed(1)},${y}C${x.toFixed(1)},${(y + h * 0.55).toFixed(1)} ${vx.toFixed(1)},${(middle - h * 0.62).toFixed(1)} ${vx.toFixed(1)},${middle}`;
        return [{ key: `${line.key} ${side}`, path, line, side, width: Math.min(2.6, 0.8 + Math.sqrt(m.equivalentWidthNm * 1e4) / 9) }];
      }),
    );
}

/** Ticks of the velocity axis, km/s. */
export function velocityTicks({ velocityFrom: from, velocityTo: to }: VeilScale): number[] {
  const step = to > 150 ? 100 : to > 60 ? 20 : 10;
  return Array.from({ length: Math.floor((to - from) / step) + 1 }, (_, i) => from + i * step);
}
