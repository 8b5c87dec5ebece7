import type { CurveData } from './curve-data.js';
import { lowerBound } from './pyramid.js';
import { smoothPath, type Frame } from './curve-paths.js';
import { drawnProfile } from './profile.js';
import type { Palette } from './palette.js';
import type { PlotFeature } from './plot-feature.js';

/** A profile narrower than this many device pixels would only smear the curve. */
const LEAST_WIDTH_PX = 3;
/** No profile is drawn on more than this many FWHM to either side. */
const WIDEST_STRETCH = 4;

const productOf = new WeakMap<CurveData, { flux: Float32Array; normalised: Float32Array }>();
/** The fit on the value axis: continuum times profiles, or the profiles alone. */
function fitValues(data: CurveData, normalised: boolean): Float32Array | null {
  const { fitted } = data;
  if (!fitted) return null;
  let product = productOf.get(data);
  if (!product) {
    product = { flux: fitted.model.map((m, i) => m * fitted.continuum[i]!), normalised: fitted.model };
    productOf.set(data, product);
  }
  return normalised ? product.normalised : product.flux;
}

/**
 * The fitted profiles, each in the colour of the family that claims it.
 * All follow the same sum of profiles; a narrow line is drawn over the broad one it lies in.
 * @param features ascending in wavelength
 */
export function drawFits(
  context: CanvasRenderingContext2D,
  f: Frame,
  data: CurveData,
  normalised: boolean,
  features: readonly PlotFeature[],
  palette: Palette,
  widthPx: number,
) {
  const values = fitValues(data, normalised);
  if (!values) return;
  const pxPerNm = f.width / (f.toNm - f.fromNm);
  const centres = features.map((feature) => feature.wavelengthNm);
  context.save();
  context.beginPath();
  context.rect(f.left, f.top, f.width, f.height);
  context.clip();
  context.lineWidth = widthPx;
  context.lineJoin = 'round';
  const widest = features.reduce((most, feature) => Math.max(most, feature.fwhmNm), 0);
  const end = lowerBound(centres, f.toNm + WIDEST_STRETCH * widest);
  const near = features
    .slice(lowerBound(centres, f.fromNm - WIDEST_STRETCH * widest), end)
    .filter((feature) => feature.fwhmNm * pxPerNm >= LEAST_WIDTH_PX && feature.state !== 'rejected')
    .sort((a, b) => b.fwhmNm - a.fwhmNm);
  for (const feature of near) {
    const { stretchNm } = drawnProfile(feature);
    const path = new Path2D();
    smoothPath(path, f, data.wavelength, values, feature.wavelengthNm - stretchNm, feature.wavelengthNm + stretchNm);
    context.strokeStyle = palette[feature.family];
    context.stroke(path);
  }
  context.restore();
}
