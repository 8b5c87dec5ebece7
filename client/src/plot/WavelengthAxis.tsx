import { useView, type Range, type ViewStore } from './view.js';
import type { WavelengthDisplay } from '../lib/wavelength.js';
import { axisTicks } from './axis-ticks.js';
import classes from './plot.module.css';

export const AXIS_HEIGHT = 22;

interface PlacedTick {
  readonly label: string;
  /** CSS px */
  readonly x: number;
  readonly labelled: boolean;
}

const CHARACTER_PX = 6.6;

/** Where the ticks stand, from the left; a label that would touch the one before, or an end, is left out. */
export function placeTicks(range: Range, width: number, display: WavelengthDisplay, spacingPx: number): PlacedTick[] {
  const x = (nm: number) => ((nm - range.fromNm) / (range.toNm - range.fromNm)) * width;
  let free = 0;
  return axisTicks(range.fromNm, range.toNm, display, Math.max(2, width / spacingPx))
    .map(({ nm, label }) => ({ label, x: x(nm) }))
    .sort((a, b) => a.x - b.x)
    .map((tick) => {
      const half = (tick.label.length * CHARACTER_PX) / 2;
      const labelled = tick.x - half >= free && tick.x + half <= width + 8;
      if (labelled) free = tick.x + half + 6;
      return { ...tick, labelled };
    });
}

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
  return (
    <svg width={width} height={AXIS_HEIGHT} className={classes.axis} aria-hidden="true">
      <line x1={0} x2={width} y1={0.5} y2={0.5} stroke="var(--line-2)" />
      {placeTicks(range, width, display, spacingPx).map(({ label, x, labelled }) => (
        <g key={label}>
          <line x1={x} x2={x} y1={0} y2={4} stroke="var(--line-2)" />
          {labelled && (
            <text x={x} y={17} textAnchor="middle">
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
