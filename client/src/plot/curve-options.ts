import uPlot from 'uplot';
import type { CurveData } from './curve-data.js';
import { columnBars, isDense, smoothPath, stepPath, type Frame } from './curve-paths.js';
import { drawFits } from './draw-fits.js';
import { drawLight } from './draw-light.js';
import type { Palette } from './palette.js';
import type { PlotFeature } from './plot-feature.js';
import { columnsOf } from './pyramid.js';
import { valueLabels, valueTicks } from './value-axis.js';
import { layerOf, type CurveMode } from './value-domain.js';

/** What the drawing hooks look at; changed in place, so that a new selection needs no new plot. */
export interface CurveScene {
  data: CurveData;
  mode: CurveMode;
  features: readonly PlotFeature[];
  palette: Palette;
  /** a spectrum of bright lines */
  emission: boolean;
}

/** Stroke of single steps, CSS px. */
const STEP_WIDTH = 1.15;

/** Room above the plot area, so that a label at its top edge is not cut; CSS px. */
export const TOP_ROOM = 8;

export const FONT = "12px 'Inter Variable', sans-serif";

/** Plot area and scales of a uPlot in device pixels. */
export function frameOf(u: uPlot): Frame {
  const { left, top, width, height } = u.bbox;
  const { x, y } = u.scales as Record<'x' | 'y', uPlot.Scale>;
  return { left, top, width, height, fromNm: x.min ?? 0, toNm: x.max ?? 1, low: y.min ?? 0, high: y.max ?? 1 };
}

/** Single steps; a stretch of more samples than pixels is drawn by `drawDense`. */
function stepsOf(u: uPlot, { data, mode }: CurveScene): uPlot.Series.Paths | null {
  const f = frameOf(u);
  if (isDense(data.wavelength, f)) return null;
  const stroke = new Path2D();
  stepPath(stroke, f, { wavelength: data.wavelength, values: layerOf(data, mode).curve.values, bad: data.bad });
  return { stroke };
}

function drawDense(u: uPlot, { data, mode, palette }: CurveScene): void {
  const f = frameOf(u);
  if (!isDense(data.wavelength, f)) return;
  const columns = columnsOf(data.wavelength, layerOf(data, mode).curve, f.fromNm, f.toNm, Math.round(f.width));
  u.ctx.fillStyle = palette.curve;
  columnBars(f, columns, (x, top, height) => u.ctx.fillRect(x, top, 1, height));
}

function continuumPath(u: uPlot, { data, mode }: CurveScene): uPlot.Series.Paths | null {
  const { level } = layerOf(data, mode);
  if (!level) return null;
  const stroke = new Path2D();
  smoothPath(stroke, frameOf(u), data.wavelength, level);
  return { stroke };
}

/** Options of the main curve. Scales are set from the view by hand, so uPlot never ranges over the data itself. */
export function curveOptions(
  scene: CurveScene,
  size: { width: number; height: number; gutter: number },
  onSelect: (leftPx: number, widthPx: number) => void,
): uPlot.Options {
  const labelled = size.gutter > 0;
  return {
    ...size,
    pxAlign: 0,
    padding: [TOP_ROOM, 0, 0, 0],
    legend: { show: false },
    cursor: { x: false, y: false, points: { show: false }, drag: { x: true, y: false, setScale: false, dist: 6 } },
    scales: { x: { time: false, auto: false }, y: { auto: false } },
    axes: [
      { show: false },
      {
        show: labelled,
        size: size.gutter,
        gap: 7,
        font: FONT,
        stroke: () => scene.palette['ink-3'],
        ticks: { show: false },
        grid: { stroke: () => scene.palette.line, width: 1, dash: [1, 3] },
        splits: (u, _axis, low, high) => valueTicks(low, high, u.bbox.height / uPlot.pxRatio),
        values: (_u, splits) => valueLabels(splits, scene.mode === 'flux' ? scene.data.fluxExponent : 0),
      },
    ],
    series: [
      {},
      { stroke: () => scene.palette.cont, width: 1.3, dash: [7, 4], points: { show: false }, paths: (u) => continuumPath(u, scene) },
      {
        stroke: () => scene.palette.curve,
        width: STEP_WIDTH,
        points: { show: false },
        paths: (u) => stepsOf(u, scene),
      },
    ],
    hooks: {
      drawAxes: [
        (u) => {
          const sides = scene.emission ? (['given', 'taken'] as const) : (['taken'] as const);
          drawLight(u.ctx, frameOf(u), scene.data, layerOf(scene.data, scene.mode), sides, scene.palette);
        },
      ],
      draw: [
        (u) => {
          drawDense(u, scene);
          drawFits(u.ctx, frameOf(u), scene.data, scene.mode === 'normalised', scene.features, scene.palette, 1.7 * uPlot.pxRatio);
        },
      ],
      setSelect: [
        (u) => {
          const { left, width } = u.select;
          u.setSelect({ left: 0, top: 0, width: 0, height: 0 }, false);
          if (width >= 6) onSelect(left, width);
        },
      ],
    },
  };
}
