import { completeSettings, settingsInWords, type Continuum } from '../identify/index.js';
import type { How, Stated } from '../reading/index.js';
import type { LineReport, ReportedSpectrum } from './types.js';
import { roundedToError } from './rounding.js';

/** What holds for the whole report. */
export function aboutReport({ programmeName, targetName, simulated, programVersion, writtenAt }: LineReport): string[] {
  return [
    'Line report',
    `programme: ${programmeName}`,
    `target: ${targetName}`,
    ...(simulated ? ['simulated: yes, these data were computed and are no observation'] : []),
    'wavelengths: vacuum, in nm; a column of air wavelengths says so (standard air, Morton 2000, ApJS 130, 403)',
    'equivalent width: positive in absorption, negative in emission',
    'velocity: relativistic Doppler velocity (VELO), positive when receding',
    'errors: 1 sigma; a number with an error is rounded to two significant digits of it',
    `program: Foreveil ${programVersion}`,
    `written: ${writtenAt}`,
  ];
}

/** What holds for one spectrum. @param number when there are several */
export function aboutSpectrum(spectrum: ReportedSpectrum, number: number | null): string[] {
  const { reading, analysis } = spectrum;
  const facts: [string, string][] = [
    ['spectrum', spectrum.label],
    ['file', spectrum.fileName],
    ['sha256', spectrum.sha256],
    ['observed', stated(reading.observedAt)],
    ['instrument', [reading.telescope, reading.instrument].filter(Boolean).join(', ') || 'not stated'],
    ['medium of the file', stated(reading.medium)],
    ['frame', reading.frame.value === 'unknown' ? 'not stated in the file' : stated(reading.frame)],
    ...(analysis ? aboutAnalysis(analysis) : ([['analysis', 'none completed yet']] as [string, string][])),
  ];
  const prefix = number === null ? '' : `spectrum ${number} `;
  return facts.map(([key, value]) =>
    number !== null && key === 'spectrum' ? `spectrum ${number}: ${value}` : `${prefix}${key}: ${value}`,
  );
}

function aboutAnalysis(analysis: NonNullable<ReportedSpectrum['analysis']>): [string, string][] {
  const { settings } = analysis;
  return [
    ['continuum', inWords(analysis.continuum)],
    ['resolving power', `${Math.round(analysis.resolvingPower)}, ${analysis.resolvingPowerHow}`],
    ['signal to noise', `${Math.round(analysis.snr)} per sample (median), noise ${analysis.noiseHow.replace('_', ', ')}`],
    ['line list', `${analysis.lineListName} ${analysis.lineListVersion}`],
    ['analysed with', `Foreveil ${analysis.programVersion}`],
    ['settings', `false features expected ${settings.falseFeatures}, velocities to ${settings.velocityRangeKmPerS} km/s`],
    ...settingsInWords(completeSettings(settings)).map(({ sentence }): [string, string] => ['set by a person', sentence]),
    ...analysis.cautions.map((caution): [string, string] => ['caution', caution]),
  ];
}

/** The fit and its temperature, or that none was made and why. */
function inWords({ model, temperatureK, temperatureSigmaK, constrained, statement }: Continuum): string {
  const method = model === 'planck' ? 'Planck fit' : 'local continuum';
  if (temperatureK === null) return [method, statement].filter(Boolean).join('; ');
  const { value, sigma } = roundedToError(temperatureK, temperatureSigmaK);
  const temperature = `colour temperature ${value}${sigma && ` +/- ${sigma}`} K`;
  return [method, temperature, constrained ? '' : 'not constrained', statement].filter(Boolean).join('; ');
}

const HOW: Record<How, string> = {
  stated: 'as stated in the file',
  assumed: 'assumed',
  corrected: 'set by a person',
  not_stated: 'not stated in the file',
};

const stated = ({ value, how, where }: Stated<string | null>): string =>
  value === null ? 'not stated' : `${value}, ${HOW[how]}${where && ` (${where})`}`;
