/** The invented star of the sign-in page: wavelengths in vacuum nm, depth of the line, FWHM in nm. Nothing of it was observed. */
type MotifLine = readonly [nm: number, depth: number, fwhmNm: number];

const STAR: readonly MotifLine[] = [
  [389.02, 0.42, 1.4],
  [397.12, 0.46, 1.5],
  [402.73, 0.16, 0.35],
  [410.29, 0.5, 1.6],
  [412.2, 0.08, 0.3],
  [434.17, 0.52, 1.6],
  [438.91, 0.09, 0.3],
  [447.27, 0.2, 0.4],
  [448.24, 0.09, 0.3],
  [471.45, 0.07, 0.3],
  [486.27, 0.55, 1.5],
  [492.33, 0.12, 0.3],
  [501.71, 0.12, 0.3],
  [587.73, 0.18, 0.4],
  [656.46, 0.5, 1.3],
  [667.99, 0.16, 0.4],
];
/** Lines of the one cloud in front of it, at rest. The threads start here. */
export const CLOUD_LINES: readonly MotifLine[] = [
  [387.57, 0.1, 0.2],
  [393.477, 0.85, 0.3],
  [395.881, 0.14, 0.2],
  [396.959, 0.75, 0.3],
  [404.53, 0.06, 0.2],
  [422.792, 0.22, 0.2],
  [423.374, 0.22, 0.2],
  [430.152, 0.34, 0.2],
  [578.21, 0.16, 0.25],
  [579.87, 0.1, 0.25],
  [589.158, 0.92, 0.32],
  [589.756, 0.86, 0.32],
  [619.77, 0.06, 0.2],
  [628.05, 0.12, 0.5],
  [661.55, 0.14, 0.25],
];
/** The Earth's air on that night. */
const AIR: readonly MotifLine[] = [
  [590.2, 0.14, 0.2],
  [591.4, 0.16, 0.2],
  [592.1, 0.12, 0.2],
  [594.2, 0.1, 0.2],
  [628.6, 0.24, 0.5],
  [629.4, 0.2, 0.5],
  [649.2, 0.08, 0.3],
  [652.1, 0.08, 0.3],
];

export const MOTIF_FROM_NM = 380;
export const MOTIF_TO_NM = 680;
const COLUMNS = 1200;
const GAP: readonly [number, number] = [442.6, 444.4];

/** Columns of its light strip: noiseless, so low and high are one. */
export function motifColumns(): (number | null)[] {
  const step = (MOTIF_TO_NM - MOTIF_FROM_NM) / COLUMNS;
  return Array.from({ length: COLUMNS }, (_, i) => {
    const nm = MOTIF_FROM_NM + (i + 0.5) * step;
    if (nm > GAP[0] && nm < GAP[1]) return null;
    return [...STAR, ...CLOUD_LINES, ...AIR].reduce((flux, [centre, depth, fwhm]) => flux * (1 - depth * profile(nm - centre, fwhm)), 1);
  });
}

const profile = (offset: number, fwhm: number): number => Math.exp(-4 * Math.LN2 * (offset / fwhm) ** 2);
