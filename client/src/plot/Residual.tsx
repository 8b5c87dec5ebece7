import { useCallback, useEffect, useRef } from 'react';
import type { CurveData } from './curve-data.js';
import { isDense, samplesInView, xOf, type Frame } from './curve-paths.js';
import { usePalette, type Palette } from './palette.js';
import { columnsOf } from './pyramid.js';
import type { ViewStore } from './view.js';
import classes from './plot.module.css';

/** Residuals are shown up to this many sigma; farther ones lie on the edge. */
const LIMIT = 6;

function drawPoints(context: CanvasRenderingContext2D, f: Frame, data: CurveData, ratio: number, y: (sigma: number) => number) {
  const residual = data.fitted!.residual;
  if (isDense(data.wavelength, f)) {
    const { low, high } = columnsOf(data.wavelength, residual, f.fromNm, f.toNm, Math.round(f.width));
    context.globalAlpha = 0.45;
    for (let c = 0; c < low.length; c++) {
      const top = y(high[c]!);
      if (!Number.isNaN(top)) context.fillRect(c, top, 1, Math.max(ratio, y(low[c]!) - top));
    }
  } else {
    const [first, end] = samplesInView(data.wavelength, f);
    const dot = 1.7 * ratio;
    context.globalAlpha = 0.8;
    for (let i = first; i < end; i++) {
      const value = residual.values[i]!;
      if (!data.bad[i] && !Number.isNaN(value)) context.fillRect(xOf(f, data.wavelength[i]!) - dot / 2, y(value) - dot / 2, dot, dot);
    }
  }
  context.globalAlpha = 1;
}

function draw(canvas: HTMLCanvasElement, data: CurveData, view: ViewStore, palette: Palette) {
  const context = canvas.getContext('2d');
  if (!context) return;
  const ratio = window.devicePixelRatio || 1;
  const [width, height] = [Math.round(canvas.clientWidth * ratio), Math.round(canvas.clientHeight * ratio)];
  if (canvas.width !== width || canvas.height !== height) [canvas.width, canvas.height] = [width, height];
  context.clearRect(0, 0, width, height);
  const y = (sigma: number) => height / 2 - (Math.max(-LIMIT, Math.min(LIMIT, sigma)) * height) / 2 / (LIMIT + 0.4);
  context.fillStyle = palette.line;
  for (const sigma of [-5, 0, 5]) context.fillRect(0, Math.round(y(sigma)), width, Math.max(1, Math.round(ratio)));
  context.fillStyle = palette.curve;
  drawPoints(context, { left: 0, top: 0, width, height, ...view.get(), low: 0, high: 1 }, data, ratio, y);
}

interface Props {
  data: CurveData;
  view: ViewStore;
  /** CSS px */
  width: number;
  height: number;
}

/** What is left of the curve when continuum and fits are taken away, in sigma. */
export function Residual({ data, view, width, height }: Props) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const palette = usePalette();
  const follow = useCallback(() => {
    if (canvas.current && data.fitted) draw(canvas.current, data, view, palette);
  }, [data, view, palette]);
  useEffect(() => {
    follow();
    return view.subscribe(follow);
  }, [follow, view, width, height]);
  return <canvas ref={canvas} className={classes.residual} style={{ width, height }} aria-hidden="true" />;
}

/** Where the band of +-2 sigma stands, as fractions of the height. */
export const RESIDUAL_BAND = { from: 0.5 - 1 / (LIMIT + 0.4), height: 2 / (LIMIT + 0.4) };

/** Where the labels of -5, 0 and +5 sigma stand, as fractions of the height. */
export const RESIDUAL_LABELS = [5, 0, -5].map((sigma) => ({
  label: sigma > 0 ? `+${sigma}` : String(sigma).replace('-', '\u2212'),
  at: 0.5 - sigma / 2 / (LIMIT + 0.4),
}));
