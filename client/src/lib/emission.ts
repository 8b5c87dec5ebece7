type Column = number | null;

const quantile = (sorted: readonly number[], q: number): number => sorted[Math.min(sorted.length - 1, Math.floor(q * sorted.length))] ?? 1;

/**
 * Whether a spectrum, by its normalised flux per column, shows bright lines rather than dark ones: its peaks rise more than twice as
 * far above the continuum as its dips fall below, and at least half as high as the continuum. Only for how its strip is drawn.
 */
export function looksLikeEmission(low: readonly Column[], high: readonly Column[]): boolean {
  const lows = low.filter((v) => v !== null).sort((a, b) => a - b);
  const highs = high.filter((v) => v !== null).sort((a, b) => a - b);
  if (!lows.length) return false;
  const rise = quantile(highs, 0.995) - 1;
  const fall = 1 - quantile(lows, 0.005);
  return rise > 0.5 && rise > 2 * fall;
}
