import { NativeSelect } from '@mantine/core';
import { hasMedium, type Medium, type WavelengthUnit } from '@foreveil/shared';
import { UNIT_LABEL, type WavelengthChoice } from '../../../lib/wavelength.js';
import type { CurveData } from '../../../plot/curve-data.js';
import type { CursorStore } from '../../../plot/cursor.js';
import type { Base, CurveMode } from '../../../plot/value-domain.js';
import type { ViewStore } from '../../../plot/view.js';
import { useSettledView } from '../state/use-settled.js';
import type { LineRow } from '../lines/reading.js';
import { useRegion, type RegionStore } from '../region/region-store.js';
import { RangeBoxes } from './RangeBoxes.js';
import { Readout } from './Readout.js';
import classes from './spectrum.module.css';

interface Props {
  data: CurveData;
  view: ViewStore;
  cursor: CursorStore;
  choice: WavelengthChoice;
  mode: CurveMode;
  base: Base;
  selected: LineRow | null;
  onMode: (mode: CurveMode) => void;
  onBase: (base: Base) => void;
  region: RegionStore;
  isSteering: boolean;
  onSteer: () => void;
}

const MODES: readonly { mode: CurveMode; word: string }[] = [
  { mode: 'flux', word: 'Flux' },
  { mode: 'normalised', word: 'Normalised' },
];

export function Toolbar({ data, view, cursor, choice, mode, base, selected, onMode, onBase, region, isSteering, onSteer }: Props) {
  const { dragMarks } = useRegion(region);
  return (
    <div className={classes.tools}>
      <div className={classes.tabs} role="radiogroup" aria-label="What the curve shows">
        {MODES.map((one) => (
          <button
            key={one.mode}
            type="button"
            role="radio"
            className={classes.tab}
            aria-checked={mode === one.mode}
            disabled={one.mode === 'normalised' && !data.fitted}
            onClick={() => onMode(one.mode)}
          >
            {one.word}
          </button>
        ))}
      </div>
      <RangeBoxes view={view} display={choice} />
      <ViewButtons view={view} />
      <div className={classes.group} role="group" aria-label="Region and analysis">
        <button
          type="button"
          className={classes.tool}
          aria-pressed={dragMarks}
          title="Mark a stretch by dragging over the curve  s e"
          onClick={() => region.setDragMarks(!dragMarks)}
        >
          Mark
        </button>
        <button type="button" className={classes.tool} aria-pressed={isSteering} title="Steer the analysis  g" onClick={onSteer}>
          Steer
        </button>
      </div>
      <div className={classes.selects}>
        <NativeSelect
          size="xs"
          aria-label="Wavelengths shown in"
          value={`${choice.unit} ${choice.medium}`}
          onChange={(event) => {
            const [unit, medium] = event.currentTarget.value.split(' ') as [WavelengthUnit, Medium];
            choice.setUnit(unit);
            if (hasMedium(unit)) choice.setMedium(medium);
          }}
          data={SHOWN_IN}
        />
        <button
          type="button"
          className={classes.tool}
          aria-pressed={base === 'close'}
          title={
            base === 'close'
              ? 'Let the flux axis start at zero'
              : 'Close in on the curve: weak lines grow, the axis no longer starts at zero'
          }
          onClick={() => onBase(base === 'close' ? 'zero' : 'close')}
        >
          {base === 'close' ? 'From zero' : 'Close up'}
        </button>
      </div>
      <Readout data={data} cursor={cursor} display={choice} selected={selected} />
    </div>
  );
}

const SHOWN_IN = (Object.entries(UNIT_LABEL) as [WavelengthUnit, string][]).flatMap(([unit, label]) =>
  hasMedium(unit)
    ? [
        { value: `${unit} vacuum`, label: `${label}, vacuum` },
        { value: `${unit} air`, label: `${label}, air` },
      ]
    : [{ value: `${unit} vacuum`, label }],
);

/** History and zoom as buttons: twins of keys, wheel and drag. */
function ViewButtons({ view }: { view: ViewStore }) {
  useSettledView(view, 60); // the history changes with the view
  return (
    <div className={classes.group} role="group" aria-label="View">
      <button
        type="button"
        className={classes.tool}
        aria-label="View before"
        title="View before  ["
        disabled={!view.canGoBack}
        onClick={() => view.back()}
      >
        ←
      </button>
      <button
        type="button"
        className={classes.tool}
        aria-label="View after"
        title="View after  ]"
        disabled={!view.canGoForward}
        onClick={() => view.forward()}
      >
        →
      </button>
      <button type="button" className={classes.tool} aria-label="Zoom out" title="Zoom out  −" onClick={() => view.show(view.zoomed(2))}>
        −
      </button>
      <button type="button" className={classes.tool} aria-label="Zoom in" title="Zoom in  +" onClick={() => view.show(view.zoomed(0.5))}>
        +
      </button>
      <button type="button" className={classes.tool} onClick={() => view.show(view.whole)}>
        All <kbd>0</kbd>
      </button>
    </div>
  );
}
