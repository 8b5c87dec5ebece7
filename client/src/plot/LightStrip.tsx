import { useCallback, useMemo } from 'react';
import { drawStrip } from './draw-strip.js';
import { usePalette } from './palette.js';
import { telling } from './strip-columns.js';
import { useCanvas, type Surface } from './useCanvas.js';

interface Props {
  wavelengthFromNm: number;
  wavelengthToNm: number;
  /** least normalised flux of each column; null where masked */
  low: (number | null)[];
  /** greatest, same length */
  high: (number | null)[];
  /** CSS px */
  height?: number;
  /** a spectrum of bright lines: drawn on dark ground */
  emission?: boolean;
  /** what it is a strip of; read aloud, and `decorative` strips leave it empty */
  label: string;
}

/** A spectrum's face: its own light from end to end, dips dark, peaks bright, beyond sight hatched, masked crossed. */
export function LightStrip({ wavelengthFromNm, wavelengthToNm, low, high, height = 30, emission = false, label }: Props) {
  const palette = usePalette();
  const columns = useMemo(() => telling(low, high), [low, high]);
  const draw = useCallback(
    (surface: Surface) => drawStrip(surface, { fromNm: wavelengthFromNm, toNm: wavelengthToNm, columns, emission }, palette),
    [wavelengthFromNm, wavelengthToNm, columns, emission, palette],
  );
  const ref = useCanvas(draw);
  const spoken = label ? { role: 'img', 'aria-label': label } : { 'aria-hidden': true };
  return <canvas ref={ref} {...spoken} style={{ display: 'block', width: '100%', height, borderRadius: 2 }} />;
}
