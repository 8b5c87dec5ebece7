import { useElementSize } from '@mantine/hooks';
import { useCallback, useMemo } from 'react';
import type { WavelengthDisplay } from '../lib/wavelength.js';
import { LightStrip } from './LightStrip.js';
import { Mark } from './Mark.js';
import { AxisTicks, AXIS_HEIGHT } from './WavelengthAxis.js';
import { WindowFrame } from './WindowFrame.js';
import { drawOverview, LANE_HEIGHT } from './draw-overview.js';
import type { CurveData } from './curve-data.js';
import type { MarkFamily } from './marks.js';
import { usePalette } from './palette.js';
import type { PlotFeature } from './plot-feature.js';
import { useCanvas, type Surface } from './useCanvas.js';
import type { ViewStore } from './view.js';
import classes from './plot.module.css';

const LANES: readonly { family: MarkFamily; word: string }[] = [
  { family: 'stellar', word: 'star' },
  { family: 'interstellar', word: 'clouds' },
  { family: 'nebular', word: 'nebula' },
  { family: 'telluric', word: 'air' },
];
const STRIP_HEIGHT = 30;
/** Beyond these the strip is hatched far enough to say so in words. */
const [UV_NM, IR_NM] = [372, 718];
const NONE: (number | null)[] = [];
const CURVE_HEIGHT = 34;

interface Props {
  data: CurveData;
  features: readonly PlotFeature[];
  view: ViewStore;
  display: WavelengthDisplay;
  emission: boolean;
  /** columns from the server, for the strip while there is no continuum */
  preview: { low: (number | null)[]; high: (number | null)[] } | null;
  /** what it is the strip of */
  label: string;
}

/** Strip, one lane of ticks a family, and the whole curve, with the frame of the window that the panels below show. */
export function Overview({ data, features, view, display, emission, preview, label }: Props) {
  const { ref, width } = useElementSize<HTMLDivElement>();
  const palette = usePalette();
  const { whole } = view;
  const lanes = useMemo(() => LANES.filter(({ family }) => features.some((f) => f.family === family)), [features]);
  const face = data.fitted ? data.face : preview;
  const families = useMemo(() => lanes.map((l) => l.family), [lanes]);
  const draw = useCallback(
    (surface: Surface) => drawOverview(surface, { data, features, lanes: families, whole, emission }, palette),
    [data, features, families, whole, emission, palette],
  );
  const canvas = useCanvas(draw);
  const lanesTop = STRIP_HEIGHT + 5;
  const drawnHeight = lanes.length * LANE_HEIGHT + 3 + CURVE_HEIGHT;

  return (
    <div className={classes.overviewRoom}>
      <div className={classes.overview} style={{ height: lanesTop + drawnHeight + AXIS_HEIGHT - 2 }} ref={ref}>
        <LightStrip
          wavelengthFromNm={whole.fromNm}
          wavelengthToNm={whole.toNm}
          low={face?.low ?? NONE}
          high={face?.high ?? NONE}
          height={STRIP_HEIGHT}
          emission={emission}
          label={label}
        />
        {whole.fromNm < UV_NM && (
          <span className={classes.beyond} style={{ left: 4, height: STRIP_HEIGHT }} aria-hidden="true">
            <b>UV</b>
          </span>
        )}
        {whole.toNm > IR_NM && (
          <span className={classes.beyond} style={{ right: 4, height: STRIP_HEIGHT }} aria-hidden="true">
            <b>IR</b>
          </span>
        )}
        <canvas ref={canvas} className={classes.overviewCurve} style={{ top: lanesTop, height: drawnHeight }} aria-hidden="true" />
        <div style={{ position: 'absolute', top: lanesTop + drawnHeight }}>
          {width > 0 && <AxisTicks range={whole} width={width} display={display} spacingPx={82} />}
        </div>
        <div className={classes.lanes} style={{ top: lanesTop - 1 }}>
          {lanes.map(({ family, word }) => (
            <div key={family} className={classes.lane}>
              <Mark family={family} state="accepted" size={11} />
              {word}
              <b>{features.filter((f) => f.family === family).length}</b>
            </div>
          ))}
        </div>
        {width > 0 && <WindowFrame view={view} display={display} width={width} height={lanesTop + drawnHeight} />}
      </div>
    </div>
  );
}
