/**
 * Samples on the wire, little-endian: uint32 n, uint32 hasSigma, then Float64 wavelength[n] (vacuum nm), Float32 flux[n],
 * Float32 sigma[n] when hasSigma, Uint8 bad[n]. Immutable for a spectrum, so the answer is cached by its ETag.
 */
export interface Samples {
  readonly wavelength: Float64Array;
  readonly flux: Float32Array;
  readonly sigma: Float32Array | null;
  readonly bad: Uint8Array;
}

/** @returns the bytes described above */
export function encodeSamples(s: {
  wavelength: Float64Array;
  flux: Float64Array;
  sigma: Float64Array | null;
  bad: Uint8Array;
}): Uint8Array {
  const n = s.wavelength.length;
  const out = new Uint8Array(8 + n * (8 + 4 + (s.sigma ? 4 : 0) + 1));
  new Uint32Array(out.buffer, 0, 2).set([n, s.sigma ? 1 : 0]);
  new Float64Array(out.buffer, 8, n).set(s.wavelength);
  new Float32Array(out.buffer, 8 + 8 * n, n).set(s.flux);
  if (s.sigma) new Float32Array(out.buffer, 8 + 12 * n, n).set(s.sigma);
  out.set(s.bad, out.length - n);
  return out;
}

/** The inverse; views on the given buffer, nothing is copied. */
export function decodeSamples(bytes: ArrayBuffer): Samples {
  const [n = 0, hasSigma = 0] = new Uint32Array(bytes, 0, 2);
  return {
    wavelength: new Float64Array(bytes, 8, n),
    flux: new Float32Array(bytes, 8 + 8 * n, n),
    sigma: hasSigma ? new Float32Array(bytes, 8 + 12 * n, n) : null,
    bad: new Uint8Array(bytes, 8 + n * (hasSigma ? 16 : 12), n),
  };
}
