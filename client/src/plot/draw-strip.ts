import { encode, quickLight, STRIP_CAP, visibility } from './light.js';
import { hexComponents, type Palette } from './palette.js';
import { shownLuminance, toDisplay } from './strip-columns.js';
import type { Surface } from './useCanvas.js';

export interface StripFace {
  readonly fromNm: number;
  readonly toNm: number;
  /** normalised flux per column, equally spaced; null where masked */
  readonly columns: readonly (number | null)[];
  readonly emission: boolean;
}

type Components = readonly [number, number, number];

/** Colours of one column of the strip: its own, and that of the strokes of the pattern over it. */
interface ColumnColours {
  readonly plain: number;
  readonly stroked: number;
}

/** Four bytes as the little-endian word that image data hold: ABGR. */
const word = ([r, g, b]: Components) => ((255 << 24) | (Math.round(b) << 16) | (Math.round(g) << 8) | Math.round(r)) >>> 0;
const mixed = (a: Components, b: Components, t: number): Components => [
  a[0] + (b[0] - a[0]) * t,
  a[1] + (b[1] - a[1]) * t,
  a[2] + (b[2] - a[2]) * t,
];

/** What the eye does not see is hatched: the tone of a wavelength outside 380-700 nm, still dark in a dip. */
function unseen(value: number, emission: boolean, luminance: number, palette: Palette): { plain: Components; stroked: Components } {
  const dark = palette.scheme === 'dark';
  const ground = hexComponents(palette.ground);
  const deepest: Components = dark ? [ground[0] * 0.55, ground[1] * 0.55, ground[2] * 0.55] : [70, 66, 62];
  if (emission) {
    const plain = mixed(ground, dark ? hexComponents(palette.hatch) : [24, 23, 22], dark ? 0.25 : 0.9);
    return {
      plain: mixed(plain, hexComponents(palette.hatch), luminance),
      stroked: mixed(plain, hexComponents(palette['hatch-ink']), 0.35 + 0.65 * luminance),
    };
  }
  const strength = Math.min(1, Math.max(0.1, Math.min(1.15, Math.max(0, value)) ** 2.2));
  const plain = mixed(deepest, hexComponents(palette.hatch), strength);
  return { plain, stroked: mixed(plain, hexComponents(palette['hatch-ink']), (dark ? 0.8 : 0.75) * strength) };
}

function columnColours(nm: number, value: number, emission: boolean, palette: Palette): ColumnColours {
  const luminance = shownLuminance(value, emission);
  const light = quickLight(nm, STRIP_CAP[palette.scheme]).map((c) => encode(c * luminance)) as unknown as Components;
  const seen = visibility(nm);
  if (seen === 1) return { plain: word(light), stroked: word(light) };
  const { plain, stroked } = unseen(value, emission, luminance, palette);
  return { plain: word(mixed(plain, light, seen)), stroked: word(mixed(stroked, light, seen)) };
}

/** Paints the whole surface with the light of the face: hatched beyond sight, crossed where masked. */
export function drawStrip({ context, width, height, ratio }: Surface, face: StripFace, palette: Palette) {
  const image = context.createImageData(width, height);
  const pixels = new Uint32Array(image.data.buffer);
  const values = toDisplay(face.columns, width, face.emission);
  const masked: ColumnColours = { plain: word(hexComponents(palette.ground)), stroked: word(hexComponents(palette.hatch)) };
  const period = Math.round(5 * ratio);
  const thickness = Math.max(1, Math.round(ratio));
  for (let x = 0; x < width; x++) {
    const value = values[x];
    const nm = face.fromNm + ((x + 0.5) / width) * (face.toNm - face.fromNm);
    const { plain, stroked } = value == null ? masked : columnColours(nm, value, face.emission, palette);
    for (let y = 0; y < height; y++) {
      const onStroke = value == null ? (x + y) % 6 === 0 || (x - y + 6000) % 6 === 0 : (x + y) % period < thickness;
      pixels[y * width + x] = onStroke ? stroked : plain;
    }
  }
  context.putImageData(image, 0, 0);
}
