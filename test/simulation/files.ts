import { vacuumToAir, type Spectrum, type VacuumNm } from '@foreveil/shared';
import type { Simulated } from './simulate.js';

/** The spectrum as a text table that says what it is; wavelengths in Angstrom. Same simulation, same bytes. */
export function csvOf({ spectrum, truth }: Simulated): string {
  const head = [
    '# simulated, shows no real object',
    '# frame: barycentric',
    `# medium: ${truth.medium}`,
    `# resolving_power: ${truth.resolving_power.toFixed(0)}`,
    `wavelength_${truth.medium === 'air' ? 'air' : 'vac'} (Angstrom),flux${spectrum.sigma ? ',flux_error' : ''}`,
  ];
  return `${[...head, ...rowsOf(spectrum, truth.medium)].join('\n')}\n`;
}

function* rowsOf({ wavelength, flux, sigma }: Spectrum, medium: 'air' | 'vacuum') {
  const scale = 1 / Math.abs(flux.find((value) => value > 0) ?? 1);
  const number = (value: number) => (Number.isFinite(value) ? (value * scale).toPrecision(7) : '');
  for (let i = 0; i < wavelength.length; i++) {
    const nm = medium === 'air' ? vacuumToAir(wavelength[i]! as VacuumNm) : wavelength[i]!;
    yield `${(10 * nm).toFixed(5)},${number(flux[i]!)}${sigma ? `,${number(sigma[i]!)}` : ''}`;
  }
}
