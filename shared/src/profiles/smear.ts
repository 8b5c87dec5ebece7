import { rotationKernel } from './shapes.js';

/** What smears a line after it was formed: the instrument, a Gaussian, or the turning of the star, a rotation profile. */
export interface Smear {
  readonly kind: 'instrument' | 'rotation';
  /** standard deviation of the Gaussian, or v sin i of the star, in Doppler widths */
  readonly width: number;
}

/** Distances and weights of a symmetric quadrature over a smear of unit width: sum of weights 1, half of the points at negative distances. */
interface Quadrature {
  readonly at: Float64Array;
  readonly weight: Float64Array;
}

function normalised(at: number[], weight: number[]): Quadrature {
  const sum = weight.reduce((a, b) => a + b, 0);
  return { at: Float64Array.from(at), weight: Float64Array.from(weight, (w) => w / sum) };
}

const GAUSSIAN_STEP = 0.25; // sigma: the flanks of saturated lines are steep
const GAUSSIAN_POINTS = 29;
const gaussian = ((): Quadrature => {
  const at = Array.from({ length: GAUSSIAN_POINTS }, (_, k) => (k - (GAUSSIAN_POINTS - 1) / 2) * GAUSSIAN_STEP);
  return normalised(
    at,
    at.map((t) => Math.exp(-0.5 * t * t)),
  );
})();

const ROTATION_POINTS = 40;
/** t = sin(theta) takes the infinite slope at the limb out of the integrand. */
const rotation = ((): Quadrature => {
  const angles = Array.from({ length: ROTATION_POINTS }, (_, k) => Math.PI * ((k + 0.5) / ROTATION_POINTS - 0.5));
  return normalised(
    angles.map(Math.sin),
    angles.map((angle) => rotationKernel(Math.sin(angle)) * Math.cos(angle)),
  );
})();

/** Three points with the variance and the fourth moment of a quadrature: exact for what is a quintic across the smear. */
function threePoints({ at, weight }: Quadrature): Quadrature {
  let [second, fourth] = [0, 0];
  at.forEach((t, j) => {
    second += weight[j]! * t ** 2;
    fourth += weight[j]! * t ** 4;
  });
  const out = Math.sqrt(fourth / second);
  const side = second ** 2 / (2 * fourth);
  return normalised([-out, 0, out], [side, 1 - 2 * side, side]);
}

const QUADRATURES = {
  instrument: { near: gaussian, far: threePoints(gaussian) },
  rotation: { near: rotation, far: threePoints(rotation) },
};

/** Sums over a smear of unit width: in full near a line's core, by three points where the line is smooth on the smear's scale. */
export const quadraturesOf = ({ kind }: Smear) => QUADRATURES[kind];

/** Distance beyond which a smear moves no light, in Doppler widths. */
export const smearReach = (smear: Smear): number => smear.width * (smear.kind === 'rotation' ? 1 : 3.5);
