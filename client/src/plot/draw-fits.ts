import type { CurveData } from './curve-data.js';
import { lowerBound } from './pyramid.js';
import { smoothPath, type Frame } from './curve-paths.js';
import type { Palette } from './palette.js';
import type { PlotFeature } from './plot-feature.js';

/** A profile narrower than this many device pixels would only smear the curve. */
const LEAST_WIDTH_PX = 3;
/** Half the stretch on which a fit is drawn, in FWHM. */
const HALF_STRETCH = 1.5;

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
 * @param features ascending in wavelength; between two neighbours the nearer one draws
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
  const end = lowerBound(centres, f.toNm + HALF_STRETCH * widest);
  for (let i = lowerBound(centres, f.fromNm - HALF_STRETCH * widest); i < end; i++) {
    const feature = features[i]!;
    if (feature.fwhmNm * pxPerNm < LEAST_WIDTH_PX || feature.state === 'rejected') continue;
    const half = HALF_STRETCH * feature.fwhmNm;
    const from = Math.max(feature.wavelengthNm - half, i > 0 ? (centres[i - 1]! + feature.wavelengthNm) / 2 : -Infinity);
    const to = Math.min(feature.wavelengthNm + half, i < features.length - 1 ? (centres[i + 1]! + feature.wavelengthNm) / 2 : Infinity);
    const path = new Path2D();
    smoothPath(path, f, data.wavelength, values, from, to);
    context.strokeStyle = palette[feature.family];
    context.stroke(path);
  }
  context.restore();
}
