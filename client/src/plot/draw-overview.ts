import type { CurveData } from './curve-data.js';
import { atColumns, extremesPath, lightColumnsPath, yOf, type Frame } from './curve-paths.js';
import { FILL_CAP, lightCss, visibility } from './light.js';
import type { MarkFamily } from './marks.js';
import type { Palette } from './palette.js';
import type { PlotFeature } from './plot-feature.js';
import { columnsOf, extremes } from './pyramid.js';
import type { Surface } from './useCanvas.js';
import type { Range } from './view.js';

export const LANE_HEIGHT = 11;

export interface OverviewScene {
  readonly data: CurveData;
  readonly features: readonly PlotFeature[];
  /** families that have a lane, from the top */
  readonly lanes: readonly MarkFamily[];
  readonly whole: Range;
  readonly emission: boolean;
}

/** A tick per feature in its family's lane, longer for the clear ones. */
function drawLanes({ context, width, ratio }: Surface, scene: OverviewScene, palette: Palette) {
  const { fromNm, toNm } = scene.whole;
  scene.lanes.forEach((family, row) => {
    context.fillStyle = palette[family];
    for (const f of scene.features) {
      if (f.family !== family) continue;
      const x = ((f.wavelengthNm - fromNm) / (toNm - fromNm)) * width;
      context.fillRect(x - ratio / 2, row * LANE_HEIGHT * ratio, ratio, (f.priority > 20 ? 8 : 5) * ratio);
    }
  });
}

/** The whole curve, with continuum and the light it lost or gained. */
export function drawOverview(surface: Surface, scene: OverviewScene, palette: Palette) {
  const { context, width, height, ratio } = surface;
  const { data, whole, emission } = scene;
  context.clearRect(0, 0, width, height);
  drawLanes(surface, scene, palette);
  const top = (scene.lanes.length * LANE_HEIGHT + 3) * ratio;
  const pair = new Float64Array(2);
  extremes(data.flux, 0, data.wavelength.length, pair);
  const frame: Frame = { left: 0, top, width, height: height - top, ...whole, low: Math.min(0, pair[0]!), high: (pair[1]! || 1) * 1.04 };
  const columns = columnsOf(data.wavelength, data.flux, whole.fromNm, whole.toNm, width);
  const level = data.fitted && atColumns(data.wavelength, data.fitted.continuum, whole, width);
  if (level) {
    const gradient = context.createLinearGradient(0, 0, width, 0);
    for (let i = 0; i <= 100; i++) {
      const nm = whole.fromNm + (i / 100) * (whole.toNm - whole.fromNm);
      gradient.addColorStop(i / 100, visibility(nm) > 0.05 ? lightCss(nm, FILL_CAP[palette.scheme]) : palette.hatch);
    }
    const light = new Path2D();
    lightColumnsPath(light, frame, columns, level, emission ? 'given' : 'taken');
    context.fillStyle = gradient;
    context.fill(light);
  }
  const curve = new Path2D();
  extremesPath(curve, frame, columns);
  context.strokeStyle = palette['ink-3'];
  context.lineWidth = 0.8 * ratio;
  context.stroke(curve);
  if (level) {
    context.beginPath();
    level.forEach((v, c) => context.lineTo(c, yOf(frame, v)));
    context.strokeStyle = palette.ink;
    context.lineWidth = 1.4 * ratio;
    context.setLineDash([6 * ratio, 4 * ratio]);
    context.stroke();
    context.setLineDash([]);
  }
}
