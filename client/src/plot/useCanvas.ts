import { useEffect, useLayoutEffect, useRef, useState, type RefObject } from 'react';

export interface Surface {
  readonly context: CanvasRenderingContext2D;
  /** device pixels */
  readonly width: number;
  readonly height: number;
  readonly ratio: number;
}

/**
 * Keeps a canvas at the size of its box in device pixels and calls `draw` when the size or `draw` itself changes.
 * `draw` should be memoised on what it draws.
 */
export function useCanvas(draw: (surface: Surface) => void): RefObject<HTMLCanvasElement | null> {
  const ref = useRef<HTMLCanvasElement>(null);
  const [size, setSize] = useState({ width: 0, height: 0, ratio: 1 });

  useEffect(() => {
    const canvas = ref.current;
    if (!canvas) return;
    const measure = () => {
      const ratio = window.devicePixelRatio || 1;
      const [width, height] = [Math.round(canvas.clientWidth * ratio), Math.round(canvas.clientHeight * ratio)];
      setSize((old) => (old.width === width && old.height === height && old.ratio === ratio ? old : { width, height, ratio }));
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(canvas);
    return () => observer.disconnect();
  }, []);

  useLayoutEffect(() => {
    const canvas = ref.current;
    const context = size.width > 0 && size.height > 0 ? canvas?.getContext('2d') : null;
    if (!canvas || !context) return;
    if (canvas.width !== size.width) canvas.width = size.width;
    if (canvas.height !== size.height) canvas.height = size.height;
    draw({ context, ...size });
  }, [draw, size]);

  return ref;
}
