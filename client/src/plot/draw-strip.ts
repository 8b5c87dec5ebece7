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

/** Bytes of one column, row by row: (row, component) to 0..255. */
type ColumnPainter = (row: number, component: number) => number;

/** Ground with a fine cross pattern. */
function maskedColumn(x: number, palette: Palette): ColumnPainter {
  const [ground, hatch] = [hexComponents(palette.ground), hexComponents(palette.hatch)];
  return (y, c) => ((x + y) % 6 === 0 || (x - y + 6000) % 6 === 0 ? hatch : ground)[c] ?? 0;
}

/** Light, fading into diagonal hatching where the eye sees none; dips stay dark in both. */
function lightColumn(x: number, nm: number, value: number, face: StripFace, palette: Palette, ratio: number): ColumnPainter {
  const dark = palette.scheme === 'dark';
  const ground = hexComponents(palette.ground);
  const hatch = hexComponents(palette.hatch);
  const stroke = hexComponents(palette['hatch-ink']);
  const seen = visibility(nm);
  const luminance = shownLuminance(value, face.emission);
  const light = quickLight(nm, STRIP_CAP[palette.scheme]).map((c) => encode(c * luminance));
  const strength = Math.min(1, Math.max(0.1, Math.min(1.15, face.emission ? luminance * 1.4 : Math.max(0, value)) ** 2.2));
  const period = Math.round(5 * ratio);
  const thickness = Math.max(1, Math.round(ratio));
  const unseen = [0, 1, 2].map((c) => {
    const deepest = dark ? (ground[c] ?? 0) * 0.55 : 70 - c * 4;
    const plain = deepest + ((hatch[c] ?? 0) - deepest) * strength;
    return [plain, plain + ((stroke[c] ?? 0) - plain) * (dark ? 0.8 : 0.75) * strength] as const;
  });
  return (y, c) => {
    const [plain, stroked] = unseen[c] ?? [0, 0];
    return seen * (light[c] ?? 0) + (1 - seen) * ((x + y) % period < thickness ? stroked : plain);
  };
}

/** Paints the whole surface with the light of the face. */
export function drawStrip({ context, width, height, ratio }: Surface, face: StripFace, palette: Palette) {
  const image = context.createImageData(width, height);
  const values = toDisplay(face.columns, width, face.emission);
  for (let x = 0; x < width; x++) {
    const nm = face.fromNm + ((x + 0.5) / width) * (face.toNm - face.fromNm);
    const value = values[x];
    const paint = value == null ? maskedColumn(x, palette) : lightColumn(x, nm, value, face, palette, ratio);
    for (let y = 0; y < height; y++) {
      const at = 4 * (y * width + x);
      for (let c = 0; c < 3; c++) image.data[at + c] = paint(y, c);
      image.data[at + 3] = 255;
    }
  }
  context.putImageData(image, 0, 0);
}
