import { chained, rotationKernel } from '../../../test/simulation/grid.js';

/** A line as an instrument shows it: depth at `x` resolution elements from its middle, before its own depth and with width 1. */
export interface Shape {
  readonly name: string;
  readonly at: (x: number) => number;
  /** full width at half depth, in resolution elements */
  readonly fwhm: number;
  /** area for unit depth, in resolution elements */
  readonly area: number;
}

const GAUSS = 2.354_82;
const gauss = (x: number, fwhm: number) => Math.exp(-0.5 * ((x * GAUSS) / fwhm) ** 2);

/** Area and width by sums fine enough that their error is far below any scatter. */
function measured(name: string, raw: (x: number) => number): Shape {
  const step = 0.005;
  const peak = raw(0);
  const at = (x: number) => raw(x) / peak;
  let area = 0;
  for (let x = -60; x <= 60; x += step) area += at(x) * step;
  let half = 0;
  while (at(half) > 0.5) half += step / 10;
  return { name, at, area, fwhm: 2 * half };
}

/** A Gaussian line of intrinsic width so that the instrument shows it `elements` wide. */
export const gaussian = (elements: number): Shape => measured(`Gaussian, ${elements} elements`, (x) => gauss(x, elements));

/** A line broadened by rotation of `elements` resolution elements on either side. */
export function rotating(elements: number): Shape {
  const step = 0.02;
  const instrument = new Float64Array(201).map((_, i) => gauss((i - 100) * step, 1));
  const kernel = chained(rotationKernel(elements, 3 * step, step), instrument);
  const middle = (kernel.length - 1) / 2;
  return measured(`rotation, ${elements} elements`, (x) => {
    const place = x / step + middle;
    const i = Math.floor(place);
    return (kernel[i] ?? 0) * (1 - (place - i)) + (kernel[i + 1] ?? 0) * (place - i);
  });
}

/** A saturated interstellar line: optical depth `tau` of Doppler width b (in elements), through the instrument. */
export function saturated(tau: number, b: number): Shape {
  const step = b / 8;
  const half = Math.ceil((4 * b) / step);
  const narrow = new Float64Array(2 * half + 1).map((_, i) => 1 - Math.exp(-tau * Math.exp(-((((i - half) * step) / b) ** 2))));
  return measured(`saturated, tau ${tau}`, (x) => narrow.reduce((sum, d, i) => sum + d * gauss(x - (i - half) * step, 1), 0));
}
