/** Wavelengths inside the program: vacuum, nm. */
export type VacuumNm = number & { readonly unit: 'nm'; readonly medium: 'vacuum' };
export type AirNm = number & { readonly unit: 'nm'; readonly medium: 'air' };
export type KmPerS = number & { readonly unit: 'km/s' };

/** Speed of light, km/s; exact by the definition of the metre. */
export const C_KM_PER_S = 299_792.458;

/** What a wavelength in a file or on a screen was measured in. Below 200 nm 'air' means vacuum by convention. */
export type Medium = 'vacuum' | 'air';

/** Units a spectral axis may be shown in. */
export type WavelengthUnit = 'nm' | 'angstrom' | 'micron' | 'wavenumber' | 'terahertz' | 'electronvolt';
