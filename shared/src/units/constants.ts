/** Exact values of the SI (BIPM SI Brochure, 9th edition 2019, section 2.2; also CODATA 2018 and 2022). */
export const C_M_PER_S = 299_792_458;
export const PLANCK_J_S = 6.626_070_15e-34;
export const BOLTZMANN_J_PER_K = 1.380_649e-23;
export const J_PER_EV = 1.602_176_634e-19;

/** h c, joule times nanometre: photon energy is this over the wavelength in nm. */
export const HC_J_NM = PLANCK_J_S * C_M_PER_S * 1e9;
