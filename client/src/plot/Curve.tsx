import 'uplot/dist/uPlot.min.css';
import { useEffect, useLayoutEffect, useRef } from 'react';
import uPlot from 'uplot';
import type { CurveData } from './curve-data.js';
import { curveOptions, type CurveScene } from './curve-options.js';
import type { CursorStore } from './cursor.js';
import { attachGestures } from './gestures.js';
import { usePalette } from './palette.js';
import type { PlotFeature } from './plot-feature.js';
import { nearestIndex } from './pyramid.js';
import { valueDomain, type Base, type CurveMode } from './value-domain.js';
import type { Range, ViewStore } from './view.js';

interface Props {
  data: CurveData;
  /** ascending in wavelength */
  features: readonly PlotFeature[];
  view: ViewStore;
  cursor: CursorStore;
  mode: CurveMode;
  base: Base;
  emission: boolean;
  width: number;
  height: number;
  /** width of the value axis, CSS px */
  gutter: number;
  /** a click that was no drag, vacuum nm */
  onPick: (nm: number) => void;
  /** a drag over a stretch; true when it was taken, else it zooms */
  onDrag?: ((range: Range) => boolean) | undefined;
}

/** The main curve: light taken, continuum, a step a pixel, fits in their families' colours. Drag zooms, shift-drag pans, the wheel zooms. */
export function Curve({ data, features, view, cursor, mode, base, emission, width, height, gutter, onPick, onDrag }: Props) {
  const holder = useRef<HTMLDivElement>(null);
  const plot = useRef<uPlot | null>(null);
  const palette = usePalette();
  const pick = useRef(onPick);
  useEffect(() => void (pick.current = onPick), [onPick]);
  const drag = useRef(onDrag);
  useEffect(() => void (drag.current = onDrag), [onDrag]);
  const scene = useRef<CurveScene>({ data, mode, features, palette, emission });

  useLayoutEffect(() => {
    if (!holder.current || width === 0 || height === 0) return;
    const toNm = (px: number) => {
      const { fromNm, toNm } = view.get();
      return fromNm + (px / (width - gutter)) * (toNm - fromNm);
    };
    const options = curveOptions(scene.current, { width, height, gutter }, (left, span) => {
      const range = { fromNm: toNm(left), toNm: toNm(left + span) };
      if (!drag.current?.(range)) view.show(range);
    });
    // the samples themselves are drawn from the pyramid; uPlot keeps only the abscissa's ends
    const ends = [view.whole.fromNm, view.whole.toNm];
    const u = new uPlot(options, [ends, [0, 0], [0, 0]], holder.current);
    plot.current = u;
    const detach = attachGestures(u.over, view, (nm) => pick.current(nm));
    return () => {
      detach();
      u.destroy();
      plot.current = null;
    };
  }, [width, height, gutter, view]);

  useLayoutEffect(() => {
    Object.assign(scene.current, { data, mode, features, palette, emission });
    const follow = () => {
      const u = plot.current;
      if (!u) return;
      const range = view.get();
      const [low, high] = valueDomain(data, mode, base, range);
      u.batch(() => {
        u.setScale('x', { min: range.fromNm, max: range.toNm });
        u.setScale('y', { min: low, max: high });
      });
    };
    follow();
    return view.subscribe(follow);
  }, [data, mode, base, features, palette, emission, view, width, height, gutter]);

  useEffect(() => {
    const over = plot.current?.over;
    if (!over) return;
    const point = (event: PointerEvent) => {
      const { fromNm, toNm } = view.get();
      const box = over.getBoundingClientRect();
      const nm = fromNm + ((event.clientX - box.left) / box.width) * (toNm - fromNm);
      const sample = nearestIndex(data.wavelength, nm);
      cursor.set(sample < 0 ? null : sample, 'pointer');
    };
    const leave = () => cursor.get().by === 'pointer' && cursor.set(null, 'pointer');
    over.addEventListener('pointermove', point);
    over.addEventListener('pointerleave', leave);
    return () => {
      over.removeEventListener('pointermove', point);
      over.removeEventListener('pointerleave', leave);
    };
  }, [data, cursor, view, width, height, gutter]);

  return <div ref={holder} aria-hidden="true" />;
}
