import { axisTicks } from '../plot/axis-ticks.js';
import type { WavelengthDisplay } from '../lib/wavelength.js';
import classes from './components.module.css';
import { placeOf, type AxisPiece } from './spectral-axis.js';

interface Props {
  axis: readonly AxisPiece[];
  display: WavelengthDisplay;
}

const at = (fraction: number) => `${(fraction * 100).toFixed(3)}%`;
/** Room that a tick label asks for, as a share of the axis: some for its surroundings, some for each letter. */
const room = (label: string) => 0.03 + 0.0146 * label.length;

interface Label {
  readonly nm: number;
  readonly text: string;
  readonly place: number;
}

/** As many round numbers as fit. */
function labelsOf(piece: AxisPiece, axis: readonly AxisPiece[], display: WavelengthDisplay): Label[] {
  const width = piece.end - piece.start;
  const ticks = (widest: number) => axisTicks(piece.fromNm, piece.toNm, display, Math.max(1, Math.floor(width / widest)));
  const first = ticks(room('000'));
  const widest = Math.max(...first.map(({ label }) => room(label)), room('000'));
  return ticks(widest)
    .map(({ nm, label }) => ({ nm, text: label, place: placeOf(nm, axis) ?? piece.start }))
    .filter(({ place, text }) => place + room(text) / 2 < 1.03); // what would stand over the next column
}

/** Tick labels over a column of strips; the first carries the unit. */
export function SpectralAxis({ axis, display }: Props) {
  const [first, second, ...rest] = axis.flatMap((piece) => labelsOf(piece, axis, display));
  const clear = first && second && second.place - first.place < room(first.text) + room(display.unitLabel) / 2 ? [] : [second];
  return (
    <div className={classes.axis}>
      {[first, ...clear, ...rest].map(
        (label) =>
          label && (
            <span key={label.nm} style={{ left: at(label.place) }}>
              {label.text}
              {label === first && <i>{display.unitLabel}</i>}
            </span>
          ),
      )}
      <Folds axis={axis} />
    </div>
  );
}

/** The slanted pairs where the axis leaves out what nobody observed. */
export function Folds({ axis }: { axis: readonly AxisPiece[] }) {
  return axis.slice(1).map((piece, i) => (
    <svg
      key={piece.start}
      aria-hidden="true"
      viewBox="0 0 12 24"
      className={classes.fold}
      style={{ left: at(((axis[i]?.end ?? 0) + piece.start) / 2) }}
    >
      <path d="M1,24L5,0M7,24L11,0" />
    </svg>
  ));
}
