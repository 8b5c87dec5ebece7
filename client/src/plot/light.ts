/**
 * The colour in which a wavelength is shown. Hue comes from the CIE 1931 2-degree observer; lightness and chroma are set in OKLab so
 * that neither yellow glares nor violet drowns, and nothing is clipped per channel.
 */
export type Rgb = readonly [number, number, number];

const smoothstep = (from: number, to: number, x: number) => {
  const t = Math.min(1, Math.max(0, (x - from) / (to - from)));
  return t * t * (3 - 2 * t);
};
export { smoothstep };

/** A Gaussian with different widths below and above its centre. */
const lobe = (nm: number, centre: number, below: number, above: number) => {
  const t = (nm - centre) / (nm < centre ? below : above);
  return Math.exp(-0.5 * t * t);
};

/**
 * CIE 1931 2-degree colour matching functions at `nm`.
 * Source: Wyman, Sloan & Shirley 2013, Journal of Computer Graphics Techniques 2(2), multi-lobe fit.
 */
export const matchingFunctions = (nm: number): Rgb => [
  1.056 * lobe(nm, 599.8, 37.9, 31.0) + 0.362 * lobe(nm, 442.0, 16.0, 26.7) - 0.065 * lobe(nm, 501.1, 20.4, 26.2),
  0.821 * lobe(nm, 568.8, 46.9, 40.5) + 0.286 * lobe(nm, 530.9, 16.3, 31.1),
  1.217 * lobe(nm, 437.0, 11.8, 36.0) + 0.681 * lobe(nm, 459.0, 26.0, 13.8),
];

/** XYZ to linear sRGB, D65 (IEC 61966-2-1). */
const toLinear = ([x, y, z]: Rgb): Rgb => [
  3.2404542 * x - 1.5371385 * y - 0.4985314 * z,
  -0.969266 * x + 1.8760108 * y + 0.041556 * z,
  0.0556434 * x - 0.2040259 * y + 1.0572252 * z,
];

/** Linear sRGB to OKLab (Ottosson 2020). */
export function toOklab([r, g, b]: Rgb): Rgb {
  const l = Math.cbrt(0.4122214708 * r + 0.5363325363 * g + 0.0514459929 * b);
  const m = Math.cbrt(0.2119034982 * r + 0.6806995451 * g + 0.1073969566 * b);
  const s = Math.cbrt(0.0883024619 * r + 0.2817188376 * g + 0.6299787005 * b);
  return [
    0.2104542553 * l + 0.793617785 * m - 0.0040720468 * s,
    1.9779984951 * l - 2.428592205 * m + 0.4505937099 * s,
    0.0259040371 * l + 0.7827717662 * m - 0.808675766 * s,
  ];
}

export function fromOklab([L, a, b]: Rgb): Rgb {
  const l = (L + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const m = (L - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const s = (L - 0.0894841775 * a - 1.291485548 * b) ** 3;
  return [
    4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s,
    -1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s,
    -0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s,
  ];
}

/** The fits wander outside; beyond these the hue is held while the lightness sinks. */
const HUE_HELD_NM = [424, 680] as const;

/** Pure light lies outside sRGB: mix with grey of equal luminance until no component is negative, then scale to full. */
function mostVivid(nm: number): Rgb {
  const xyz = matchingFunctions(Math.min(Math.max(nm, HUE_HELD_NM[0]), HUE_HELD_NM[1]));
  let rgb = toLinear(xyz);
  const lowest = Math.min(...rgb);
  if (lowest < 0) {
    const k = xyz[1] / (xyz[1] - lowest);
    rgb = rgb.map((v) => xyz[1] + k * (v - xyz[1])) as unknown as Rgb;
  }
  const highest = Math.max(...rgb);
  return rgb.map((v) => v / highest) as unknown as Rgb;
}

/** Largest chroma inside sRGB at this lightness and hue, by bisection. */
function largestChroma(lightness: number, hue: number): number {
  let inside = 0;
  let outside = 0.24;
  for (let i = 0; i < 14; i++) {
    const chroma = (inside + outside) / 2;
    const rgb = fromOklab([lightness, chroma * Math.cos(hue), chroma * Math.sin(hue)]);
    if (rgb.every((v) => v >= -1e-4 && v <= 1.0001)) inside = chroma;
    else outside = chroma;
  }
  return inside;
}

/** Linear sRGB, 0 to 1, of light at `nm`; `cap` is the highest OKLab lightness the ground allows. */
export function lightOf(nm: number, cap: number): Rgb {
  const [vivid, a, b] = toOklab(mostVivid(nm));
  const hue = Math.atan2(b, a);
  const endOfSight = 1 - 0.22 * smoothstep(424, 386, nm) - 0.2 * smoothstep(655, 705, nm);
  const lightness = Math.min(cap, Math.max(0.58, vivid)) * endOfSight;
  const chroma = 0.86 * largestChroma(lightness, hue);
  const rgb = fromOklab([lightness, chroma * Math.cos(hue), chroma * Math.sin(hue)]);
  return rgb.map((v) => Math.min(1, Math.max(0, v))) as unknown as Rgb;
}

const STEP_NM = 0.5;
const TABLE_FROM_NM = 360;
const TABLE_TO_NM = 740;
const tables = new Map<number, Float32Array>();

/** `lightOf` every half nanometre, three values each, computed once per lightness cap: a strip asks some thousand times. */
function tableFor(cap: number): Float32Array {
  const known = tables.get(cap);
  if (known) return known;
  const rows = Math.round((TABLE_TO_NM - TABLE_FROM_NM) / STEP_NM) + 1;
  const table = new Float32Array(3 * rows);
  for (let i = 0; i < rows; i++) table.set(lightOf(TABLE_FROM_NM + i * STEP_NM, cap), 3 * i);
  tables.set(cap, table);
  return table;
}

/** As `lightOf`, from the table. */
export function quickLight(nm: number, cap: number): Rgb {
  const table = tableFor(cap);
  const row = Math.round((Math.min(Math.max(nm, TABLE_FROM_NM), TABLE_TO_NM) - TABLE_FROM_NM) / STEP_NM);
  return [table[3 * row] ?? 0, table[3 * row + 1] ?? 0, table[3 * row + 2] ?? 0];
}

/** Linear component to the 0..255 of the screen. */
export const encode = (v: number) => Math.round(255 * (v <= 0.0031308 ? 12.92 * v : 1.055 * v ** (1 / 2.4) - 0.055));

/** Light at `nm` as a CSS colour. Outside 380-700 nm it is the held end hue; use `isVisible` to say so. */
export function lightCss(nm: number, cap: number): string {
  const [r, g, b] = quickLight(nm, cap);
  return `rgb(${encode(r)} ${encode(g)} ${encode(b)})`;
}

/** How far a wavelength counts as visible light, 0 to 1: strips fade into hatching below about 380 and above about 700 nm. */
export const visibility = (nm: number) => smoothstep(372, 388, nm) * (1 - smoothstep(692, 712, nm));

/** Lightness caps by ground. */
export const STRIP_CAP = { light: 0.81, dark: 0.77 } as const;
export const FILL_CAP = { light: 0.8, dark: 0.7 } as const;
