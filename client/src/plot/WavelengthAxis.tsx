import { useView, type Range, type ViewStore } from './view.js';
import type { WavelengthDisplay } from '../lib/wavelength.js';
import { axisTicks } from './axis-ticks.js';
import classes from './plot.module.css';

export const AXIS_HEIGHT = 22;

/** Ticks and labels of a stretch, in the unit a person chose. */
export function AxisTicks({
  range,
  width,
  display,
  spacingPx = 84,
}: {
  range: Range;
  width: number;
  display: WavelengthDisplay;
  spacingPx?: number;
}) {
  const ticks = axisTicks(range.fromNm, range.toNm, display, Math.max(2, width / spacingPx));
  const x = (nm: number) => ((nm - range.fromNm) / (range.toNm - range.fromNm)) * width;
  return (
    <svg width={width} height={AXIS_HEIGHT} className={classes.axis} aria-hidden="true">
      <line x1={0} x2={width} y1={0.5} y2={0.5} stroke="var(--line-2)" />
      {ticks.map(({ nm, label }) => (
        <g key={label} transform={`translate(${x(nm).toFixed(1)} 0)`}>
          <line y1={0} y2={4} stroke="var(--line-2)" />
          {x(nm) > 14 && x(nm) < width - 14 && (
            <text y={17} textAnchor="middle">
              {label}
            </text>
          )}
        </g>
      ))}
    </svg>
  );
}

/** The abscissa of the curve; follows the view. */
export function WavelengthAxis({ view, width, display }: { view: ViewStore; width: number; display: WavelengthDisplay }) {
  return <AxisTicks range={useView(view)} width={width} display={display} />;
}
