import { useState, type KeyboardEvent, type PointerEvent } from 'react';
import type { WavelengthDisplay } from '../lib/wavelength.js';
import { shownWavelength } from './axis-ticks.js';
import { useView, type Range, type ViewStore } from './view.js';
import classes from './plot.module.css';

interface Props {
  view: ViewStore;
  display: WavelengthDisplay;
  width: number;
  height: number;
}

/** A window thinner than this is drawn this wide, CSS px. */
const LEAST_PX = 5;

type Part = 'middle' | 'from' | 'to';

interface Drag {
  part: Part;
  x: number;
  start: Range;
}

function dragged(start: Range, part: Part, byNm: number): Range {
  if (part === 'from') return { ...start, fromNm: Math.min(start.fromNm + byNm, start.toNm) };
  if (part === 'to') return { ...start, toNm: Math.max(start.toNm + byNm, start.fromNm) };
  return { fromNm: start.fromNm + byNm, toNm: start.toNm + byNm };
}

/** What an arrow key does to the window: a tenth of its length along, or with Shift its upper end. */
function afterKey(key: string, shift: boolean, view: ViewStore): Range | null {
  const { fromNm, toNm } = view.get();
  const tenth = (toNm - fromNm) / 10;
  const direction = key === 'ArrowRight' || key === 'ArrowUp' ? 1 : key === 'ArrowLeft' || key === 'ArrowDown' ? -1 : 0;
  if (direction !== 0) return shift ? { fromNm, toNm: toNm + direction * tenth } : view.shifted(direction / 10);
  if (key === 'PageUp' || key === 'PageDown') return view.shifted(key === 'PageUp' ? 1 : -1);
  if (key === 'Home') return view.shifted(-Infinity);
  if (key === 'End') return view.shifted(Infinity);
  return null;
}

/** The window on the whole curve: drag it or its edges, press beside it to jump there, or use the arrow keys. */
export function WindowFrame({ view, display, width, height }: Props) {
  const range = useView(view);
  const [drag, setDrag] = useState<Drag | null>(null);
  const { whole } = view;
  const nmPerPx = (whole.toNm - whole.fromNm) / width;
  const left = (range.fromNm - whole.fromNm) / nmPerPx;
  const span = Math.max(LEAST_PX, (range.toNm - range.fromNm) / nmPerPx);

  const begin = (part: Part) => (event: PointerEvent<HTMLElement>) => {
    if (event.button !== 0) return;
    event.stopPropagation();
    event.currentTarget.setPointerCapture(event.pointerId);
    setDrag({ part, x: event.clientX, start: view.get() });
  };
  const jump = (event: PointerEvent<HTMLElement>) => {
    const nm = whole.fromNm + (event.clientX - event.currentTarget.getBoundingClientRect().left) * nmPerPx;
    const half = (range.toNm - range.fromNm) / 2;
    view.show({ fromNm: nm - half, toNm: nm + half });
    begin('middle')(event);
  };
  const move = (event: PointerEvent) => {
    if (!drag) return;
    const byNm = (event.clientX - drag.x) * nmPerPx;
    const limited =
      drag.part === 'middle' ? Math.min(Math.max(byNm, whole.fromNm - drag.start.fromNm), whole.toNm - drag.start.toNm) : byNm;
    view.move(dragged(drag.start, drag.part, limited));
  };
  const end = () => {
    setDrag(null);
  };
  const key = (event: KeyboardEvent) => {
    const next = afterKey(event.key, event.shiftKey, view);
    if (!next) return;
    event.preventDefault();
    view.move(next);
  };
  const shown = (nm: number) => shownWavelength(nm, display, 2);

  return (
    <div
      style={{ position: 'absolute', inset: '0 0 auto 0', height, touchAction: 'pan-y' }}
      onPointerDown={jump}
      onPointerMove={move}
      onPointerUp={end}
      onPointerCancel={end}
    >
      <div
        className={classes.frame}
        style={{ left: left - 1, width: span + 2, top: -6, height: height + 6 }}
        data-glide={drag || view.inGesture ? undefined : true}
        role="slider"
        tabIndex={0}
        aria-label="Window on the spectrum"
        aria-valuemin={whole.fromNm}
        aria-valuemax={whole.toNm}
        aria-valuenow={(range.fromNm + range.toNm) / 2}
        aria-valuetext={`${shown(range.fromNm)} to ${shown(range.toNm)} ${display.unitLabel}`}
        title="Drag the window or its edges; arrow keys move it, with Shift they change its length"
        onPointerDown={begin('middle')}
        onKeyDown={key}
      >
        <div className={classes.grip} style={{ left: -11 }} onPointerDown={begin('from')} />
        <div className={classes.grip} style={{ right: -11 }} onPointerDown={begin('to')} />
      </div>
    </div>
  );
}
