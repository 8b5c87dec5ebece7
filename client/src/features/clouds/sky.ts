import type { CloudSightline } from '@foreveil/shared';

export interface SkyMark {
  readonly targetId: string;
  readonly targetName: string;
  readonly x: number;
  readonly y: number;
}
export interface Sky {
  readonly marks: readonly SkyMark[];
  readonly raTicks: readonly { deg: number; x: number }[];
  readonly decTicks: readonly { deg: number; y: number }[];
  readonly decimals: number;
}
export interface SkyFrame {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
}

const RAD = Math.PI / 180;
/** right ascension within half a turn of `centre`, so that no field breaks at 0° */
const near = (ra: number, centre: number) => centre + ((((ra - centre + 180) % 360) + 360) % 360) - 180;

/**
 * Places targets on a flat chart: right ascension grows to the left, declination upwards, one scale for both (right ascension shortened by the
 * cosine of the middle declination). @returns null when no target has a position
 */
export function layOutSky(sightlines: readonly CloudSightline[], { left, right, top, bottom }: SkyFrame): Sky | null {
  const placed = [...new Map(sightlines.map((s) => [s.targetId, s])).values()].flatMap(({ targetId, targetName, raDeg, decDeg }) =>
    raDeg === null || decDeg === null ? [] : [{ targetId, targetName, raDeg, decDeg }],
  );
  const [first] = placed;
  if (!first) return null;
  const ras = placed.map((p) => near(p.raDeg, first.raDeg));
  const decs = placed.map((p) => p.decDeg);
  const middle = (all: number[]) => (Math.min(...all) + Math.max(...all)) / 2;
  const extent = (all: number[]) => Math.max(...all) - Math.min(...all);
  const [ra0, dec0] = [middle(ras), middle(decs)];
  const shortened = Math.max(0.02, Math.cos(dec0 * RAD));
  const [width, height] = [right - left, bottom - top];
  // at least 0.1 degrees across the shorter side, and a margin about the outermost marks
  const degPerPixel = Math.max((extent(ras) * shortened * 1.4) / width, (extent(decs) * 1.4) / height, 0.1 / Math.min(width, height));
  const x = (ra: number) => (left + right) / 2 - ((ra - ra0) * shortened) / degPerPixel;
  const y = (dec: number) => (top + bottom) / 2 - (dec - dec0) / degPerPixel;
  const half = { ra: (width * degPerPixel) / shortened / 2, dec: (height * degPerPixel) / 2 };
  const [raStep, decStep] = [stepOf(half.ra * 2), stepOf(half.dec * 2)];
  return {
    marks: placed.map(({ targetId, targetName, decDeg }, i) => ({ targetId, targetName, x: x(ras[i]!), y: y(decDeg) })),
    raTicks: ticks(ra0 - half.ra, ra0 + half.ra, raStep).map((deg) => ({ deg: ((deg % 360) + 360) % 360, x: x(deg) })),
    decTicks: ticks(Math.max(-90, dec0 - half.dec), Math.min(90, dec0 + half.dec), decStep).map((deg) => ({ deg, y: y(deg) })),
    decimals: Math.max(0, -Math.floor(Math.log10(Math.min(raStep, decStep)) + 1e-9)),
  };
}

/** A round step that gives three to five ticks. */
function stepOf(span: number): number {
  const power = 10 ** Math.floor(Math.log10(span / 3));
  return ([5, 2, 1].find((m) => m * power <= span / 3) ?? 1) * power;
}

function ticks(from: number, to: number, step: number): number[] {
  const first = Math.ceil(from / step);
  return Array.from({ length: Math.max(0, Math.floor(to / step) - first + 1) }, (_, i) => (first + i) * step);
}
