import type { CurveData } from './curve-data.js';
import { atColumns, isDense, lightColumnsPath, lightPath, xOf, type Frame, type LightSide } from './curve-paths.js';
import { FILL_CAP, lightCss, visibility } from './light.js';
import type { Palette } from './palette.js';
import { columnsOf } from './pyramid.js';
import type { Layer } from './value-domain.js';

/** The colours of the light across the frame; beyond sight it turns to the hatch tone. */
function lightGradient(context: CanvasRenderingContext2D, f: Frame, palette: Palette): CanvasGradient {
  const gradient = context.createLinearGradient(xOf(f, f.fromNm), 0, xOf(f, f.toNm), 0);
  const stops = Math.min(120, Math.max(2, Math.ceil((f.toNm - f.fromNm) / 2)));
  for (let i = 0; i <= stops; i++) {
    const nm = f.fromNm + (i / stops) * (f.toNm - f.fromNm);
    gradient.addColorStop(i / stops, visibility(nm) > 0.05 ? lightCss(nm, FILL_CAP[palette.scheme]) : palette.hatch);
  }
  return gradient;
}

/** Fills what a line took from the continuum, or gave to it, with the colour of that very light. */
export function drawLight(
  context: CanvasRenderingContext2D,
  f: Frame,
  data: CurveData,
  layer: Layer,
  sides: readonly LightSide[],
  palette: Palette,
) {
  const { level } = layer;
  if (!level) return;
  context.save();
  context.beginPath();
  context.rect(f.left, f.top, f.width, f.height);
  context.clip();
  context.fillStyle = lightGradient(context, f, palette);
  if (palette.scheme === 'dark') context.globalAlpha = 0.92;
  const trace = { wavelength: data.wavelength, values: layer.curve.values, bad: data.bad };
  for (const side of sides) {
    const path = new Path2D();
    if (isDense(data.wavelength, f)) {
      const n = Math.round(f.width);
      lightColumnsPath(
        path,
        f,
        columnsOf(data.wavelength, layer.curve, f.fromNm, f.toNm, n),
        atColumns(data.wavelength, level, f, n),
        side,
      );
    } else lightPath(path, f, trace, level, side);
    context.fill(path);
  }
  context.restore();
}
