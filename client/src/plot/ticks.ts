/** Round numbers between two bounds, about `count` of them. */
export function niceTicks(low: number, high: number, count: number): number[] {
  if (!(high > low) || count < 1) return [];
  const rough = (high - low) / count;
  const power = 10 ** Math.floor(Math.log10(rough));
  const lead = rough / power;
  const step = (lead < 1.5 ? 1 : lead < 3.5 ? 2 : lead < 7.5 ? 5 : 10) * power;
  const ticks: number[] = [];
  for (let k = Math.ceil(low / step - 1e-9); k * step <= high + step * 1e-6; k++) ticks.push(k * step);
  return ticks;
}

/** Digits after the point that tell neighbouring ticks apart. */
export function tickDigits(ticks: readonly number[]): number {
  if (ticks.length < 2) return 2;
  const step = Math.abs(ticks[1]! - ticks[0]!);
  return Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
}
